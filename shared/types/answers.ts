/** Shapes that every answer of the API shares. */

export interface Page<T> {
  items: T[]
  /** Opaque; send it back as `?cursor=` for the next page; null when there is none. */
  nextCursor: string | null
}

/** `{ ok: true }`: the write happened and there is nothing else to say. */
export interface Done {
  ok: true
}

/** One message a field, by the field's name in the request (dots for depth). */
export type FieldErrors = Record<string, string>

/** The body of every error, `{ statusCode, statusMessage, data }`; `code` is kebab-case and stable. */
export interface ErrorAnswer {
  statusCode: number
  statusMessage: string
  data: {
    code: string
    message: string
    fields?: FieldErrors
    requestId?: string
  }
}

/** `GET /health`. */
export interface HealthAnswer {
  status: 'ok' | 'failing'
  version: string
  database: 'ok' | 'failing'
  migrations: { done: number, known: number }
}
