import type { H3Event } from 'h3'
import { getRequestHeader } from 'h3'
import type { Ctx } from '#server/context'

/**
 * True when this very request, key and body, was carried out before and is carried out again because its answer sets a cookie (see
 * `answer`, `repeated: 'again'`): it names a key that is not to be claimed any more.
 */
export function isRepeated(event: H3Event, ctx: Ctx): boolean {
  return ctx.repeatable === undefined && getRequestHeader(event, 'idempotency-key') !== undefined
}
