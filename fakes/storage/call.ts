import type { ObjectStore } from './object-store'
import type { BodyReceiver } from './receive'
import type { StorageRequest } from './request'
import { Refusal } from './refusals'
import type { UploadStore } from './upload-store'

/** What every handler is given: the request, already believed, and the stores. */
export interface Call {
  request: StorageRequest
  bucket: string
  key: string
  body: BodyReceiver
  objects: ObjectStore
  uploads: UploadStore
  dataDir: string
  nowMs: number
}

const STORED_HEADERS = ['content-type', 'cache-control', 'content-disposition', 'content-encoding', 'content-language', 'expires'] as const
const MAX_METADATA_BYTES = 2048
const META_PREFIX = 'x-amz-meta-'

/** The headers that are kept with an object and given back on reading. Refuses metadata beyond the service's 2 KB. */
export function readStoredHeaders(request: StorageRequest): Record<string, string> {
  const stored: Record<string, string> = { 'content-type': 'binary/octet-stream' }
  let metadataBytes = 0
  const keep = (name: string, value: string) => {
    if (name.startsWith(META_PREFIX)) metadataBytes += Buffer.byteLength(name.slice(META_PREFIX.length)) + Buffer.byteLength(value)
    stored[name] = value
  }
  for (const name of STORED_HEADERS) {
    const value = request.headers.get(name)
    if (value !== undefined) keep(name, value)
  }
  // Presigners hoist metadata into the address, where it means the same.
  for (const [name, value] of [...request.query, ...request.headers]) {
    if (name.toLowerCase().startsWith(META_PREFIX)) keep(name.toLowerCase(), value)
  }
  if (metadataBytes > MAX_METADATA_BYTES) {
    throw new Refusal('metadata-too-large', '', { MaxSizeAllowed: String(MAX_METADATA_BYTES), Size: String(metadataBytes) })
  }
  return stored
}
