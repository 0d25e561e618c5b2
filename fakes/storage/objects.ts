import type { Answer } from './answer'
import { contentRange, readByteRanges } from './byte-range'
import type { ByteRange } from './byte-range'
import type { Call } from './call'
import { readStoredHeaders } from './call'
import { CHECKSUM_ALGORITHMS } from './checksums'
import { isNotModified, isRangeStillGood, refuseOverwrite } from './conditions'
import type { ObjectRecord } from './object-store'
import { Refusal } from './refusals'
import { findAmzValue } from './request'

/** PutObject. */
export async function putObject(call: Call): Promise<Answer> {
  const { request, key, objects, dataDir, nowMs } = call
  const headers = readStoredHeaders(request)
  refuseOverwrite(request.headers, objects.find(key))
  return call.body.toFile(dataDir, async ({ tempPath, bytes, md5Hex, checksums }) => {
    // Asked again after the wait for the body: of two writers with If-None-Match the later one must lose.
    refuseOverwrite(request.headers, objects.find(key))
    const etag = `"${md5Hex}"`
    await objects.commit(tempPath, { key, bytes, etag, headers, checksums, lastModifiedMs: nowMs })
    return { status: 200, headers: { ETag: etag } }
  })
}

/** GetObject and HeadObject: the same answer, of which HEAD is sent the headers. */
export async function getObject(call: Call): Promise<Answer> {
  const { request, key, objects } = call
  await call.body.toText()
  const record = objects.find(key)
  if (!record) throw new Refusal('no-such-key', '', { Key: key })
  if (isNotModified(request.headers, record)) return { status: 304, headers: versionHeaders(record) }

  const wanted = isRangeStillGood(request.headers, record) ? request.headers.get('range') : undefined
  const range = findRange(wanted, record.bytes)
  const headers: Record<string, string> = {
    ...record.headers,
    ...versionHeaders(record),
    'Accept-Ranges': 'bytes',
    ...readOverrides(call),
  }
  if (range) headers['Content-Range'] = contentRange(range, record.bytes)
  else Object.assign(headers, readStoredChecksums(call, record))
  const body = { descriptor: objects.openBody(record), range: range ?? { start: 0, end: record.bytes } }
  return { status: range ? 206 : 200, headers, body }
}

/** DeleteObject: gone afterwards, whether or not it was there. */
export async function deleteObject(call: Call): Promise<Answer> {
  await call.body.toText()
  await call.objects.delete(call.key)
  return { status: 204, headers: {} }
}

function versionHeaders(record: ObjectRecord): Record<string, string> {
  return { 'ETag': record.etag, 'Last-Modified': new Date(record.lastModifiedMs).toUTCString() }
}

/** The one range to serve; undefined for the whole, also for several ranges, which the service does not serve. */
function findRange(header: string | undefined, lengthBytes: number): ByteRange | undefined {
  const reading = readByteRanges(header, lengthBytes)
  if (reading.kind === 'unsatisfiable') {
    throw new Refusal('invalid-range', '', { RangeRequested: header ?? '', ActualObjectSize: String(lengthBytes) })
  }
  return reading.kind === 'ranges' && reading.ranges.length === 1 ? reading.ranges[0] : undefined
}

/** `response-content-type=…` and its kin in a signed address replace what was stored. */
function readOverrides(call: Call): Record<string, string> {
  return Object.fromEntries(call.request.query
    .filter(([name]) => name.startsWith('response-'))
    .map(([name, value]) => [name.slice('response-'.length), value]))
}

function readStoredChecksums(call: Call, record: ObjectRecord): Record<string, string> {
  if (findAmzValue(call.request, 'x-amz-checksum-mode') !== 'ENABLED') return {}
  const headers: Record<string, string> = {}
  for (const algorithm of CHECKSUM_ALGORITHMS) {
    const value = record.checksums[algorithm]
    if (value !== undefined) headers[`x-amz-checksum-${algorithm}`] = value
  }
  return headers
}
