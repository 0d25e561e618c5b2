import type { ServerResponse } from 'node:http'
import { closeSync, createReadStream } from 'node:fs'
import { pipeline } from 'node:stream/promises'
import type { ByteRange } from './byte-range'
import type { Refusal } from './refusals'
import { element, xmlDocument } from './xml'

/** Bytes of a file already opened, so that an object replaced meanwhile is still read whole. */
export interface FileSlice {
  descriptor: number
  range: ByteRange
}

/** An answer before it is sent. Content-Length is added when sending, unless given (HEAD has one without a body). */
export interface Answer {
  status: number
  headers: Record<string, string>
  body?: string | FileSlice
}

export function xmlAnswer(root: string, inner: string[]): Answer {
  return { status: 200, headers: { 'Content-Type': 'application/xml' }, body: xmlDocument(root, inner) }
}

/**
 * The error document of a refusal. `X-Fake-Refusal` names the row of the table: several rows share a code, and a test
 * must see that it met the one it meant.
 */
export function refusalAnswer(refusal: Refusal, resource: string, requestId: string): Answer {
  const body = xmlDocument('Error', [
    element('Code', refusal.code),
    element('Message', refusal.message),
    ...Object.entries(refusal.fields).map(([name, text]) => element(name, text)),
    element('Resource', resource),
    element('RequestId', requestId),
  ], false)
  const size = refusal.fields.ActualObjectSize
  const headers: Record<string, string> = { 'Content-Type': 'application/xml', 'X-Fake-Refusal': refusal.row }
  if (refusal.row === 'invalid-range' && size !== undefined) headers['Content-Range'] = `bytes */${size}`
  return { status: refusal.status, headers, body }
}

/** Sends an answer; a HEAD gets the headers alone. Resolves when all is sent or the client is gone. */
export async function sendAnswer(response: ServerResponse, method: string, answer: Answer): Promise<void> {
  const { body } = answer
  const lengthBytes = typeof body === 'string' ? Buffer.byteLength(body) : body ? body.range.end - body.range.start : 0
  const hasNoBody = answer.status === 204 || answer.status === 304
  response.writeHead(answer.status, {
    ...(hasNoBody ? {} : { 'Content-Length': String(lengthBytes) }),
    ...answer.headers,
  })
  if (method === 'HEAD' || body === undefined || lengthBytes === 0) {
    discardAnswer(answer)
    response.end()
    return
  }
  if (typeof body === 'string') {
    response.end(body)
    return
  }
  const bytes = createReadStream('', { fd: body.descriptor, start: body.range.start, end: body.range.end - 1 })
  // A player drops a transfer whenever it seeks: the pipeline then fails, the file is closed, and nothing is wrong.
  await pipeline(bytes, response).catch(() => response.destroy())
}

/** Lets go of the file of an answer that will not be sent. */
export function discardAnswer(answer: Answer): void {
  if (typeof answer.body === 'object') closeSync(answer.body.descriptor)
}
