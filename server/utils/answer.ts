import { createHash } from 'node:crypto'
import type { H3Event } from 'h3'
import { getRequestHeader, setResponseHeader, setResponseStatus } from 'h3'
import type { RepeatableRequest } from '#server/write'
import { AlreadyDone, findDone } from '#server/write'
import { keyedHash } from '#server/ids'
import { Refusal } from '#server/refusal'
import { runningApp } from '#server/running'
import { findViewer } from '#server/features/sessions/session.service'
import { toHttpError } from './errors'
import { readBodyText } from './input'
import type { UploadLimits } from './read-upload'
import { readUpload } from './read-upload'

interface AnswerOptions {
  /** Of a success; 200 when not named. */
  status?: 201 | 202
  /** `again` for answers that also set a cookie: a repeated request is carried out anew, which must be harmless. */
  repeated?: 'stored' | 'again'
  /** For a POST that brings files: how much of them is read. */
  form?: UploadLimits
}

/**
 * Runs a handler's work, gives a repeated POST its stored answer, and turns refusals into HTTP errors.
 * Everything an API handler answers passes through here.
 */
export async function answer<T>(event: H3Event, work: () => Promise<T>, options: AnswerOptions = {}): Promise<T> {
  try {
    setResponseHeader(event, 'Cache-Control', 'no-store')
    const repeatable = event.method === 'POST' ? await readRepeatable(event, options.form) : undefined
    const result = repeatable ? await answerOnce(event, repeatable, work, options.repeated ?? 'stored') : await work()
    if (options.status) setResponseStatus(event, options.status)
    return result
  }
  catch (error) {
    throw toHttpError(event, error)
  }
}

async function answerOnce<T>(event: H3Event, request: RepeatableRequest, work: () => Promise<T>, repeated: 'stored' | 'again'): Promise<T> {
  const stored = await findStored<T>(request)
  if (stored && repeated === 'stored') return stored.answer
  // A request that is carried out again has its key already: claiming it a second time would end as AlreadyDone.
  if (!stored) event.context.repeatable = request
  try {
    return await work()
  }
  catch (error) {
    if (!(error instanceof AlreadyDone)) throw error
    const winner = await findStored<T>(request)
    if (!winner) throw error
    if (repeated === 'stored') return winner.answer
    event.context.repeatable = undefined
    return work()
  }
}

async function findStored<T>(request: RepeatableRequest): Promise<{ answer: T } | undefined> {
  const stored = await findDone(runningApp().db, request)
  if (!stored) return undefined
  if (stored.request_hash !== request.requestHash) {
    throw new Refusal('wrong-moment', 'key-used-before', 'This Idempotency-Key came with another body before.')
  }
  return { answer: JSON.parse(stored.answer) }
}

async function readRepeatable(event: H3Event, form: UploadLimits | undefined): Promise<RepeatableRequest | undefined> {
  const key = getRequestHeader(event, 'idempotency-key')
  if (key === undefined) return undefined
  if (!/^[\x21-\x7e]{8,128}$/.test(key)) {
    throw new Refusal('malformed', 'bad-idempotency-key', 'An Idempotency-Key has 8 to 128 visible ASCII characters.')
  }
  const app = runningApp()
  const viewer = await findViewer(event, app, app.clock.nowMs())
  // A stranger is turned away in any case: nobody's files are read for that.
  if (form && !viewer) return undefined
  const asked = form ? await describeForm(event, form) : await readBodyText(event)
  if (asked === undefined) return undefined
  return {
    // Hashed: some addresses carry a link's secret.
    scope: `${viewer?.id ?? 'visitor'} ${keyedHash(app.settings.sessionPassword, event.path.split('?')[0] ?? '')}`,
    key,
    // The body may hold a password: nobody with the file alone may test guesses against it.
    requestHash: keyedHash(app.settings.sessionPassword, asked),
  }
}

/**
 * What a form asks for, without its boundary, which a browser makes anew each time it sends the same form. Undefined for one that cannot be read:
 * the work says so, after asking who sends it.
 */
async function describeForm(event: H3Event, form: UploadLimits): Promise<string | undefined> {
  const files = await readUpload(event, form).catch(() => undefined)
  if (!files) return undefined
  const digests = files.map(({ field, bytes }) => `${field} ${createHash('sha256').update(bytes).digest('hex')}`)
  return [event.path.split('?')[1] ?? '', ...digests].join('\n')
}
