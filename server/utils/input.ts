import type { H3Event } from 'h3'
import { getQuery, getRequestHeader, getRouterParams } from 'h3'
import type { z } from 'zod'
import type { FieldErrors } from '#shared/types/answers'
import { Refusal, invalidFields, notFound } from '#server/refusal'

/** A letter of the longest permitted parts is well below this. */
const MAX_JSON_BYTES = 256 * 1024

/**
 * The request's JSON, checked by its schema. An absent body reads as `{}`.
 * @throws Refusal `malformed` (400) when it is not JSON, `too-large` (413), `invalid` (422) with a message a field.
 */
export async function readJson<S extends z.ZodType>(event: H3Event, schema: S): Promise<z.output<S>> {
  const body = await readBodyText(event)
  return check(schema, parseJson(body, getRequestHeader(event, 'content-type')))
}

/** @throws Refusal `not-found`: an address whose id cannot be one names nothing. */
export function readParams<S extends z.ZodType>(event: H3Event, schema: S, what: string): z.output<S> {
  const parsed = schema.safeParse(getRouterParams(event, { decode: true }))
  if (!parsed.success) throw notFound(what)
  return parsed.data
}

export function readQuery<S extends z.ZodType>(event: H3Event, schema: S): z.output<S> {
  return check(schema, getQuery(event))
}

/** The raw text of the body, read once and kept, since the idempotency key covers it too. */
export async function readBodyText(event: H3Event): Promise<string> {
  event.context.bodyText ??= collectBody(event, MAX_JSON_BYTES)
  return event.context.bodyText
}

export async function collectBody(event: H3Event, maxBytes: number): Promise<string> {
  if (Number(getRequestHeader(event, 'content-length') ?? 0) > maxBytes) throw bodyTooLarge()
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of event.node.req) {
    const buffer = Buffer.isBuffer(chunk) ? chunk : Buffer.from(String(chunk))
    bytes += buffer.length
    if (bytes > maxBytes) throw bodyTooLarge()
    chunks.push(buffer)
  }
  return Buffer.concat(chunks).toString('utf8')
}

function bodyTooLarge(): Refusal {
  return new Refusal('too-large', 'too-large', 'This is more than can be sent at once.')
}

function parseJson(body: string, contentType: string | undefined): unknown {
  if (body.length === 0) return {}
  if (!/^application\/json\b/i.test(contentType ?? '')) throw notJson()
  try {
    return JSON.parse(body)
  }
  catch {
    throw notJson()
  }
}

function notJson(): Refusal {
  return new Refusal('malformed', 'not-json', 'The body must be JSON, sent as application/json.')
}

function check<S extends z.ZodType>(schema: S, input: unknown): z.output<S> {
  const parsed = schema.safeParse(input)
  if (parsed.success) return parsed.data
  throw invalidFields(fieldErrors(parsed.error))
}

/** The first message of each field; a problem of the whole stands under `_`. */
export function fieldErrors(error: z.ZodError): FieldErrors {
  const fields: FieldErrors = {}
  for (const issue of error.issues) {
    const name = issue.path.map(String).join('.') || '_'
    fields[name] ??= issue.message
  }
  return fields
}
