import { randomUUID } from 'node:crypto'
import { getResponseStatus, setResponseHeader } from 'h3'
import { runningApp } from '../running'

/** Secrets of links stand in addresses; a log must not keep them. */
const SECRET = /[A-Za-z0-9_-]{40,}/g

/** A name and a line in the log for each request. */
export default defineNitroPlugin((nitroApp) => {
  nitroApp.hooks.hook('request', async (event) => {
    event.context.requestId = randomUUID()
    event.context.startedAtMs = performance.now()
    setResponseHeader(event, 'X-Request-Id', event.context.requestId)
    await runningApp().ready
  })

  nitroApp.hooks.hook('afterResponse', async (event) => {
    const path = event.path.split('?')[0] ?? ''
    if (path.startsWith('/_nuxt/')) return
    const viewer = await event.context.viewer?.catch(() => undefined)
    runningApp().log.info({
      requestId: event.context.requestId,
      method: event.method,
      path: path.replace(SECRET, ':secret'),
      status: getResponseStatus(event),
      tookMs: Math.round(performance.now() - (event.context.startedAtMs ?? 0)),
      userId: viewer?.id,
    }, 'request')
  })
})
