import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { open, rm } from 'node:fs/promises'
import type { Answer } from './answer'
import { xmlAnswer } from './answer'
import type { Call } from './call'
import { readStoredHeaders } from './call'
import { CHECKSUM_ALGORITHMS } from './checksums'
import { refuseOverwrite } from './conditions'
import { newTempPath } from './disk'
import type { NamedPart } from './part-list'
import { readPartList } from './part-list'
import { Refusal } from './refusals'
import { findQueryValue } from './request'
import type { PartRecord } from './upload-store'
import { element } from './xml'

const MAX_PART_NUMBER = 10_000
/** All parts but the last (Amazon S3 User Guide, "Multipart upload limits"). */
const MIN_PART_BYTES = 5 * 1024 ** 2

/** CreateMultipartUpload: type and metadata are given here and kept for the object. */
export async function createMultipartUpload(call: Call): Promise<Answer> {
  const { request, bucket, key, nowMs } = call
  await call.body.toText()
  const upload = await call.uploads.insert({ key, headers: readStoredHeaders(request), initiatedAtMs: nowMs })
  return xmlAnswer('InitiateMultipartUploadResult', [
    element('Bucket', bucket), element('Key', key), element('UploadId', upload.uploadId),
  ])
}

/** UploadPart: sending a number again replaces the part. */
export async function uploadPart(call: Call): Promise<Answer> {
  const { key, uploads, dataDir, nowMs } = call
  const upload = uploads.get(readUploadId(call), key)
  const text = findQueryValue(call.request, 'partNumber') ?? ''
  const number = Number(text)
  if (!/^\d{1,5}$/.test(text) || number < 1 || number > MAX_PART_NUMBER) {
    throw new Refusal('invalid-part-number', '', { ArgumentName: 'partNumber', ArgumentValue: text })
  }
  return call.body.toFile(dataDir, async ({ tempPath, bytes, md5Hex, checksums }) => {
    const etag = `"${md5Hex}"`
    await uploads.commitPart(upload, tempPath, { number, bytes, etag, checksums, lastModifiedMs: nowMs })
    const headers: Record<string, string> = { ETag: etag }
    for (const algorithm of CHECKSUM_ALGORITHMS) {
      const value = checksums[algorithm]
      if (value !== undefined) headers[`x-amz-checksum-${algorithm}`] = value
    }
    return { status: 200, headers }
  })
}

/** AbortMultipartUpload. */
export async function abortMultipartUpload(call: Call): Promise<Answer> {
  const { key, uploads } = call
  const uploadId = readUploadId(call)
  await call.body.toText()
  return uploads.exclusively(uploadId, async () => {
    uploads.get(uploadId, key)
    await uploads.remove(uploadId)
    return { status: 204, headers: {} }
  })
}

/** CompleteMultipartUpload: the named parts, in order, become the object; parts not named are thrown away. */
export async function completeMultipartUpload(call: Call): Promise<Answer> {
  const { request, bucket, key, uploads, objects, nowMs } = call
  const uploadId = readUploadId(call)
  const document = await call.body.toText()
  return uploads.exclusively(uploadId, async () => {
    const upload = uploads.get(uploadId, key)
    const parts = choosePieces(readPartList(document), uploads.listParts(uploadId, key))
    refuseOverwrite(request.headers, objects.find(key))
    const tempPath = newTempPath(call.dataDir)
    try {
      const bytes = await concatenate(parts.map(part => uploads.partPath(uploadId, part)), tempPath)
      const etag = multipartEtag(parts)
      await objects.commit(tempPath, { key, bytes, etag, headers: upload.headers, checksums: {}, lastModifiedMs: nowMs })
      await uploads.remove(uploadId)
      return xmlAnswer('CompleteMultipartUploadResult', [
        element('Location', `http://${request.headers.get('host') ?? ''}${request.target.split('?')[0] ?? ''}`),
        element('Bucket', bucket), element('Key', key), element('ETag', etag),
      ])
    }
    finally {
      await rm(tempPath, { force: true })
    }
  })
}

function readUploadId(call: Call): string {
  return findQueryValue(call.request, 'uploadId') ?? ''
}

/** The stored parts that were named. Refuses a wrong order first, then unknown parts, then small ones, as the service does. */
function choosePieces(named: NamedPart[], stored: PartRecord[]): PartRecord[] {
  named.forEach((part, index) => {
    const before = named[index - 1]
    if (before && before.number >= part.number) throw new Refusal('invalid-part-order')
  })
  const byNumber = new Map(stored.map(part => [part.number, part]))
  const chosen = named.map((part) => {
    const found = byNumber.get(part.number)
    if (!found || found.etag !== part.etag || !hasSameChecksums(part, found)) {
      throw new Refusal('invalid-part', '', { PartNumber: String(part.number), ETag: part.etag })
    }
    return found
  })
  const small = chosen.slice(0, -1).find(part => part.bytes < MIN_PART_BYTES)
  if (small) {
    throw new Refusal('part-too-small', '', {
      ProposedSize: String(small.bytes), MinSizeAllowed: String(MIN_PART_BYTES), PartNumber: String(small.number), ETag: small.etag,
    })
  }
  return chosen
}

function hasSameChecksums(named: NamedPart, stored: PartRecord): boolean {
  return CHECKSUM_ALGORITHMS.every(algorithm =>
    named.checksums[algorithm] === undefined || named.checksums[algorithm] === stored.checksums[algorithm])
}

/** MD5 over the binary MD5s of the parts, a dash, and their count: what the service answers, and not the MD5 of the whole. */
function multipartEtag(parts: PartRecord[]): string {
  const hash = createHash('md5')
  for (const part of parts) hash.update(Buffer.from(part.etag.slice(1, -1), 'hex'))
  return `"${hash.digest('hex')}-${parts.length}"`
}

/** Copies files into one, a chunk at a time, and answers the bytes written. */
async function concatenate(paths: string[], target: string): Promise<number> {
  const file = await open(target, 'wx')
  let bytes = 0
  try {
    for (const path of paths) {
      for await (const chunk of createReadStream(path)) {
        const piece: unknown = chunk
        if (!Buffer.isBuffer(piece)) continue
        await file.write(piece)
        bytes += piece.length
      }
    }
  }
  finally {
    await file.close()
  }
  return bytes
}
