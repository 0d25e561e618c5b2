import type { ServerResponse } from 'node:http'
import type { Failure, State } from './store'

/**
 * Takes the first failure ordered for `POST /v1/refunds` and the like, and counts it down. `match` is part of
 * `METHOD /path`; a `$` at its end pins it to the end of the path, `*` matches everything.
 */
export function takeFailure(state: State, method: string, path: string): Failure | undefined {
  const line = `${method} ${path}`
  const failure = state.failures.find(({ match }) => matches(match, line))
  if (failure === undefined) return undefined
  failure.times -= 1
  if (failure.times === 0) state.failures.splice(state.failures.indexOf(failure), 1)
  return { ...failure }
}

function matches(match: string, line: string): boolean {
  if (match === '*') return true
  return match.endsWith('$') ? line.endsWith(match.slice(0, -1)) : line.includes(match)
}

/** Fails as ordered: an error answer, silence until the client gives up, or a cut connection. Returns what was done. */
export async function fail(failure: Failure, response: ServerResponse): Promise<number | string> {
  if (failure.status !== undefined) {
    response.writeHead(failure.status, { 'Content-Type': 'application/json', 'Request-Id': 'req_failed_on_purpose' })
    response.end(JSON.stringify({ error: errorFor(failure.status) }))
    return failure.status
  }
  if (failure.hang === true) {
    await new Promise<void>(resolve => response.once('close', resolve))
    return 'hung'
  }
  response.socket?.resetAndDestroy()
  return 'reset'
}

function errorFor(status: number) {
  const message = `Failed on purpose with ${status}.`
  if (status === 429) return { type: 'invalid_request_error', code: 'rate_limit', message }
  return { type: status >= 500 ? 'api_error' : 'invalid_request_error', message }
}
