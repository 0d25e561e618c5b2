import { getRequestHeader } from 'h3'
import { Refusal } from '../refusal'
import { runningApp } from '../running'
import { toHttpError } from '../utils/errors'

const SAFE_METHODS = new Set(['GET', 'HEAD', 'OPTIONS'])
/** These carry a proof of their own: a signature, or the secret of a link. */
const EXEMPT = /^\/(webhooks|unsubscribe)\//

/**
 * Refuses writes that another site's page makes in somebody's name. Between ports of one host `Sec-Fetch-Site` is `same-site`,
 * so only `same-origin` will do; programs that send neither header carry no foreign page's request.
 */
export default defineEventHandler((event) => {
  if (SAFE_METHODS.has(event.method) || EXEMPT.test(event.path)) return
  const site = getRequestHeader(event, 'sec-fetch-site')
  const origin = getRequestHeader(event, 'origin')
  const isOwn = site !== undefined
    ? site === 'same-origin'
    : origin === undefined ? getRequestHeader(event, 'cookie') === undefined : origin === new URL(runningApp().settings.appUrl).origin
  if (!isOwn) {
    throw toHttpError(event, new Refusal('not-allowed', 'other-site', 'This came from another site and was not carried out.'))
  }
})
