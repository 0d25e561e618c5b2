import type { H3Event } from 'h3'
import { createError, isError, setResponseHeader } from 'h3'
import type { ErrorAnswer } from '#shared/types/answers'
import type { RefusalKind } from '#server/refusal'
import { Refusal } from '#server/refusal'

const STATUS_OF: Record<RefusalKind, [number, string]> = {
  'malformed': [400, 'Bad Request'],
  'not-signed-in': [401, 'Unauthorized'],
  'not-allowed': [403, 'Forbidden'],
  'not-found': [404, 'Not Found'],
  'wrong-moment': [409, 'Conflict'],
  'gone': [410, 'Gone'],
  'too-large': [413, 'Content Too Large'],
  'wrong-kind': [415, 'Unsupported Media Type'],
  'invalid': [422, 'Unprocessable Content'],
  'too-many': [429, 'Too Many Requests'],
  'unavailable': [503, 'Service Unavailable'],
}

/** The one place where a refusal becomes a status. Faults pass through and are answered as 500 by `server/error.ts`. */
export function toHttpError(event: H3Event, error: unknown): unknown {
  if (!(error instanceof Refusal)) return error
  if (error.retryAfterSeconds !== undefined) setResponseHeader(event, 'Retry-After', error.retryAfterSeconds)
  const [statusCode, statusMessage] = STATUS_OF[error.kind]
  return createError({ statusCode, statusMessage, message: error.message, data: { code: error.code, message: error.message, fields: error.fields } })
}

/** The stable shape of every error, whatever was thrown. A fault tells nothing of itself but the request id. */
export function toErrorAnswer(error: unknown, requestId: string | undefined): ErrorAnswer {
  if (isError(error) && error.statusCode < 500) {
    return {
      statusCode: error.statusCode,
      statusMessage: error.statusMessage ?? '',
      data: { ...readData(error.data, error.statusCode), requestId },
    }
  }
  const isBusy = isError(error) && error.statusCode === 503
  return {
    statusCode: isBusy ? 503 : 500,
    statusMessage: isBusy ? 'Service Unavailable' : 'Internal Server Error',
    data: isBusy
      ? { ...readData(error.data, 503), requestId }
      : { code: 'fault', message: 'Something broke on our side. Nothing you sent was lost if you can still see it; try again in a moment.', requestId },
  }
}

function readData(data: unknown, statusCode: number): ErrorAnswer['data'] {
  if (isErrorData(data)) return { code: data.code, message: data.message, ...(data.fields && { fields: data.fields }) }
  if (statusCode === 404) return { code: 'not-found', message: 'There is nothing at this address.' }
  if (statusCode === 405) return { code: 'wrong-method', message: 'This address does not take that method.' }
  return { code: `status-${statusCode}`, message: 'This request cannot be answered.' }
}

function isErrorData(data: unknown): data is ErrorAnswer['data'] {
  return typeof data === 'object' && data !== null && 'code' in data && 'message' in data
    && typeof data.code === 'string' && typeof data.message === 'string'
}
