import { randomUUID } from 'node:crypto'
import type { H3Event } from 'h3'
import { setResponseHeader } from 'h3'
import { runningApp } from '../running'

/** Secrets of links stand in addresses; a log must not keep them. */
const SECRET = /[A-Za-z0-9_-]{40,}/g

/** A name and a line in the log for each request. */
export default defineNitroPlugin((nitroApp) => {
  nitroApp.hooks.hook('request', async (event) => {
    event.context.requestId = randomUUID()
    const startedAtMs = performance.now()
    setResponseHeader(event, 'X-Request-Id', event.context.requestId)
    // Nitro's own hook after the response is not called for errors.
    event.node.res.once('close', () => void logRequest(event, performance.now() - startedAtMs))
    await runningApp().ready
  })
})

async function logRequest(event: H3Event, tookMs: number): Promise<void> {
  const path = event.path.split('?')[0] ?? ''
  if (path.startsWith('/_nuxt/')) return
  const viewer = await event.context.viewer?.catch(() => undefined)
  runningApp().log.info({
    requestId: event.context.requestId,
    method: event.method,
    path: path.replace(SECRET, ':secret'),
    status: event.node.res.statusCode,
    tookMs: Math.round(tookMs),
    userId: viewer?.id,
  }, 'request')
}
