import type { H3Event } from 'h3'
import { isError, send, setResponseHeader, setResponseStatus } from 'h3'
import { runningApp } from './running'
import { toErrorAnswer } from './utils/errors'

/** Addresses whose errors are JSON for everybody, whatever the client says it accepts. */
const MACHINE_PATHS = /^\/(api|webhooks|calendar|unsubscribe|health)(\/|$|\?)/

/** Ahead of Nuxt's own handler, which would answer some API errors with a page. */
export default async function answerError(error: unknown, event: H3Event): Promise<void> {
  const isFault = !isError(error) || error.statusCode >= 500
  if (isFault) logFault(error, event)
  if (!MACHINE_PATHS.test(event.path)) return
  const body = toErrorAnswer(error, event.context.requestId)
  setResponseStatus(event, body.statusCode, body.statusMessage)
  setResponseHeader(event, 'Content-Type', 'application/json')
  setResponseHeader(event, 'Cache-Control', 'no-store')
  await send(event, JSON.stringify(body))
}

function logFault(error: unknown, event: H3Event): void {
  const cause = isError(error) && error.cause ? error.cause : error
  try {
    runningApp().log.error({ requestId: event.context.requestId, err: cause }, 'fault')
  }
  catch {
    console.error(cause)
  }
}
