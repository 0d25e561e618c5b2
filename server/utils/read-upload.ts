import { Writable } from 'node:stream'
import { errors } from 'formidable'
import type { H3Event } from 'h3'
import { getRequestHeader } from 'h3'
import { readFiles } from 'h3-formidable'
import { Refusal } from '#server/refusal'

/** One attached file, by the name of its field. What it is, only its bytes can tell. */
export interface Upload {
  field: string
  bytes: Buffer
}

export interface UploadLimits {
  /** For all files together. */
  maxBytes: number
  maxFiles: number
}

/** Boundaries and part headers, beside the files themselves. */
const FRAME_BYTES = 64 * 1024

/**
 * The files of a small multipart form, held in memory: nothing is left behind, whatever goes wrong. Read once and kept with the
 * request, since the idempotency key covers them too.
 * @throws Refusal `too-large` (413), also for too many files; `not-a-form` (400) for what is cut short or no multipart form.
 */
export async function readUpload(event: H3Event, limits: UploadLimits): Promise<Upload[]> {
  event.context.uploads ??= collectFiles(event, limits)
  return event.context.uploads
}

async function collectFiles(event: H3Event, { maxBytes, maxFiles }: UploadLimits): Promise<Upload[]> {
  if (!/^multipart\/form-data\s*;/i.test(getRequestHeader(event, 'content-type') ?? '')) throw notAForm()
  // Said before reading where the length is known: nobody should send all of it to hear that it is too much.
  if (Number(getRequestHeader(event, 'content-length') ?? 0) > maxBytes + FRAME_BYTES) throw tooLarge(maxBytes)
  const chunksOf = new Map<unknown, Buffer[]>()
  try {
    const { files } = await readFiles(event, {
      maxFiles,
      maxFileSize: maxBytes,
      maxTotalFileSize: maxBytes,
      maxFields: 20,
      maxFieldsSize: FRAME_BYTES,
      allowEmptyFiles: true,
      minFileSize: 0,
      fileWriteStreamHandler: (file) => {
        const chunks: Buffer[] = []
        chunksOf.set(file, chunks)
        return collecting(chunks)
      },
    })
    return Object.entries(files).flatMap(([field, list]) =>
      (list ?? []).map(file => ({ field, bytes: Buffer.concat(chunksOf.get(file) ?? []) })))
  }
  catch (error) {
    throw toRefusal(error, maxBytes)
  }
}

function collecting(chunks: Buffer[]): Writable {
  return new Writable({
    write(chunk: Buffer, _encoding, done) {
      chunks.push(chunk)
      done()
    },
  })
}

const TOO_MUCH = new Set<unknown>([
  errors.biggerThanMaxFileSize, errors.biggerThanTotalMaxFileSize, errors.maxFieldsExceeded, errors.maxFieldsSizeExceeded, errors.maxFilesExceeded,
])

/** The parser answers 500 to what it will not read; whatever it says of a body is about the body. */
function toRefusal(error: unknown, maxBytes: number): unknown {
  if (!(error instanceof Error) || !('code' in error) || typeof error.code !== 'number') return error
  return TOO_MUCH.has(error.code) ? tooLarge(maxBytes) : notAForm()
}

function tooLarge(maxBytes: number): Refusal {
  return new Refusal('too-large', 'too-large', `Only one file of at most ${Math.floor(maxBytes / 1024 / 1024)} MB can be sent.`)
}

function notAForm(): Refusal {
  return new Refusal('malformed', 'not-a-form', 'The file must be sent as a multipart form, and all of it.')
}
