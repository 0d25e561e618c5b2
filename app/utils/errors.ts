import type { FieldErrors } from '#shared/types/answers'

/** What a screen needs of a failed request. */
export interface ReadError {
  /** HTTP status; 0 when no answer came at all. */
  statusCode: number
  /** The stable code of the answer; `no-answer` without one, `unknown` when the answer is not in our shape. */
  code: string
  message: string
  fields: FieldErrors
}

const noAnswer: ReadError = {
  statusCode: 0,
  code: 'no-answer',
  message: 'The studio could not be reached. What you typed is still here. Check your connection and try again.',
  fields: {},
}

const unknownFault: ReadError = {
  statusCode: 500,
  code: 'unknown',
  message: 'Something went wrong on our side. What you typed is still here. Try again in a minute.',
  fields: {},
}

/**
 * Reads whatever a failed `$fetch` or `useFetch` gives (a FetchError, or Nuxt's own wrapping of one).
 * Never throws; an answer that is not in the shape of `ErrorAnswer` (a proxy's page, say) gets plain words of our own.
 */
export function readErrorAnswer(error: unknown): ReadError {
  if (isWithoutAnswer(error) || isWithoutAnswer(readKey(error, 'cause'))) return noAnswer
  const statusCode = readNumber(readKey(error, 'statusCode')) ?? 500
  const inner = findAnswerData(error)
  if (!inner) return { ...unknownFault, statusCode }
  return { statusCode, code: inner.code, message: inner.message, fields: inner.fields }
}

/** By name and not by class: the page and the server renderer may each carry a copy of the class. */
function isWithoutAnswer(error: unknown): boolean {
  return readKey(error, 'name') === 'FetchError' && readKey(error, 'response') === undefined
}

function findAnswerData(error: unknown): Omit<ReadError, 'statusCode'> | undefined {
  const data = readKey(error, 'data')
  // `$fetch` keeps the whole body in `data`; Nuxt's copy of an error may hold the inner part there already.
  for (const candidate of [readKey(data, 'data'), data]) {
    const code = readKey(candidate, 'code')
    const message = readKey(candidate, 'message')
    if (typeof code === 'string' && typeof message === 'string') {
      return { code, message, fields: readFields(readKey(candidate, 'fields')) }
    }
  }
  return undefined
}

function readFields(value: unknown): FieldErrors {
  if (typeof value !== 'object' || value === null) return {}
  return Object.fromEntries(Object.entries(value).filter((entry): entry is [string, string] => typeof entry[1] === 'string'))
}

function readKey(value: unknown, key: string): unknown {
  if (typeof value !== 'object' || value === null) return undefined
  return Reflect.get(value, key)
}

function readNumber(value: unknown): number | undefined {
  return typeof value === 'number' ? value : undefined
}
