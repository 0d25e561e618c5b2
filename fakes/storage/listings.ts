import type { Answer } from './answer'
import { xmlAnswer } from './answer'
import type { Call } from './call'
import { compareKeys } from './object-store'
import { Refusal } from './refusals'
import { findQueryValue } from './request'
import { element, group } from './xml'

/** The service answers at most so many entries, however many are asked for. */
const MAX_PAGE = 1000

/** ListObjectsV2 with prefix, continuation-token and max-keys. */
export async function listObjects(call: Call): Promise<Answer> {
  await call.body.toText()
  const prefix = findQueryValue(call.request, 'prefix') ?? ''
  const token = findQueryValue(call.request, 'continuation-token')
  const maxKeys = readPageSize(call, 'max-keys')
  const after = token === undefined ? undefined : readToken(token)
  const rest = call.objects.list()
    .filter(record => record.key.startsWith(prefix) && (after === undefined || compareKeys(record.key, after) > 0))
  const page = rest.slice(0, maxKeys)
  const last = page.at(-1)
  const isTruncated = last !== undefined && page.length < rest.length
  return xmlAnswer('ListBucketResult', [
    element('Name', call.bucket), element('Prefix', prefix), element('KeyCount', page.length),
    element('MaxKeys', maxKeys), element('IsTruncated', isTruncated),
    ...(token === undefined ? [] : [element('ContinuationToken', token)]),
    ...(isTruncated ? [element('NextContinuationToken', makeToken(last.key))] : []),
    ...page.map(record => group('Contents',
      element('Key', record.key), element('LastModified', toIso(record.lastModifiedMs)), element('ETag', record.etag),
      element('Size', record.bytes), element('StorageClass', 'STANDARD'))),
  ])
}

/** ListParts, paged by part number. */
export async function listParts(call: Call): Promise<Answer> {
  await call.body.toText()
  const { key, bucket } = call
  const uploadId = findQueryValue(call.request, 'uploadId') ?? ''
  const marker = readInteger(call, 'part-number-marker', 0)
  const maxParts = readPageSize(call, 'max-parts')
  const rest = call.uploads.listParts(uploadId, key).filter(part => part.number > marker)
  const page = rest.slice(0, maxParts)
  return xmlAnswer('ListPartsResult', [
    element('Bucket', bucket), element('Key', key), element('UploadId', uploadId), element('StorageClass', 'STANDARD'),
    element('PartNumberMarker', marker), element('NextPartNumberMarker', page.at(-1)?.number ?? 0),
    element('MaxParts', maxParts), element('IsTruncated', page.length < rest.length),
    ...page.map(part => group('Part',
      element('PartNumber', part.number), element('LastModified', toIso(part.lastModifiedMs)),
      element('ETag', part.etag), element('Size', part.bytes))),
  ])
}

/** ListMultipartUploads: what was begun and neither completed nor aborted. */
export async function listMultipartUploads(call: Call): Promise<Answer> {
  await call.body.toText()
  const prefix = findQueryValue(call.request, 'prefix') ?? ''
  const keyMarker = findQueryValue(call.request, 'key-marker') ?? ''
  // Without a key the id marker is passed over (Amazon S3 API Reference, ListMultipartUploads).
  const idMarker = keyMarker === '' ? '' : findQueryValue(call.request, 'upload-id-marker') ?? ''
  const maxUploads = readPageSize(call, 'max-uploads')
  const rest = call.uploads.list().filter((upload) => {
    const order = compareKeys(upload.key, keyMarker)
    return upload.key.startsWith(prefix)
      && (keyMarker === '' || order > 0 || (order === 0 && idMarker !== '' && compareKeys(upload.uploadId, idMarker) > 0))
  })
  const page = rest.slice(0, maxUploads)
  const last = page.at(-1)
  const isTruncated = last !== undefined && page.length < rest.length
  return xmlAnswer('ListMultipartUploadsResult', [
    element('Bucket', call.bucket), element('Prefix', prefix), element('KeyMarker', keyMarker), element('UploadIdMarker', idMarker),
    element('MaxUploads', maxUploads), element('IsTruncated', isTruncated),
    ...(isTruncated ? [element('NextKeyMarker', last.key), element('NextUploadIdMarker', last.uploadId)] : []),
    ...page.map(upload => group('Upload',
      element('Key', upload.key), element('UploadId', upload.uploadId),
      element('StorageClass', 'STANDARD'), element('Initiated', toIso(upload.initiatedAtMs)))),
  ])
}

function readPageSize(call: Call, name: string): number {
  return Math.min(readInteger(call, name, MAX_PAGE), MAX_PAGE)
}

function readInteger(call: Call, name: string, fallback: number): number {
  const text = findQueryValue(call.request, name)
  if (text === undefined) return fallback
  if (!/^\d{1,10}$/.test(text) || Number(text) > 2_147_483_647) {
    throw new Refusal('invalid-listing-argument', '', { ArgumentName: name, ArgumentValue: text })
  }
  return Number(text)
}

/** Opaque to the client, as in the service, so that nobody builds one from a key. */
function makeToken(key: string): string {
  return Buffer.from(`after:${key}`, 'utf8').toString('base64url')
}

function readToken(token: string): string {
  const text = Buffer.from(token, 'base64url').toString('utf8')
  if (!text.startsWith('after:')) throw new Refusal('invalid-continuation-token')
  return text.slice('after:'.length)
}

function toIso(ms: number): string {
  return new Date(ms).toISOString()
}
