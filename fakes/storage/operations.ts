import type { StorageRequest } from './request'
import { CHECKSUM_ALGORITHMS } from './checksums'
import { Refusal } from './refusals'

interface OperationRow {
  method: string
  on: 'bucket' | 'object'
  /** Query parameters that make it this operation; a value other than '' must be met. */
  needs: Readonly<Record<string, string>>
  /** Query parameters it obeys besides. */
  allows: readonly string[]
}

const OVERRIDES = [
  'response-content-type', 'response-content-disposition', 'response-cache-control',
  'response-content-language', 'response-content-encoding', 'response-expires',
] as const

/** The part of the S3 API that this stand-in speaks. */
export const OPERATIONS = {
  CreateMultipartUpload: { method: 'POST', on: 'object', needs: { uploads: '' }, allows: [] },
  CompleteMultipartUpload: { method: 'POST', on: 'object', needs: { uploadId: '' }, allows: [] },
  UploadPart: { method: 'PUT', on: 'object', needs: { uploadId: '', partNumber: '' }, allows: [] },
  ListParts: { method: 'GET', on: 'object', needs: { uploadId: '' }, allows: ['part-number-marker', 'max-parts'] },
  AbortMultipartUpload: { method: 'DELETE', on: 'object', needs: { uploadId: '' }, allows: [] },
  ListMultipartUploads: { method: 'GET', on: 'bucket', needs: { uploads: '' }, allows: ['prefix', 'key-marker', 'upload-id-marker', 'max-uploads'] },
  PutObject: { method: 'PUT', on: 'object', needs: {}, allows: [] },
  GetObject: { method: 'GET', on: 'object', needs: {}, allows: OVERRIDES },
  HeadObject: { method: 'HEAD', on: 'object', needs: {}, allows: OVERRIDES },
  DeleteObject: { method: 'DELETE', on: 'object', needs: {}, allows: [] },
  ListObjectsV2: { method: 'GET', on: 'bucket', needs: { 'list-type': '2' }, allows: ['prefix', 'continuation-token', 'max-keys'] },
  HeadBucket: { method: 'HEAD', on: 'bucket', needs: {}, allows: [] },
} as const satisfies Record<string, OperationRow>

export type OperationName = keyof typeof OPERATIONS

const ROWS: Readonly<Record<OperationName, OperationRow>> = OPERATIONS

/** Headers of the x-amz- family that are obeyed, or that the stand-in may pass over without storing anything wrong. */
export const KNOWN_AMZ_NAMES: ReadonlySet<string> = new Set([
  'x-amz-date', 'x-amz-content-sha256', 'x-amz-user-agent', 'x-amz-sdk-checksum-algorithm', 'x-amz-checksum-mode',
  ...CHECKSUM_ALGORITHMS.map(algorithm => `x-amz-checksum-${algorithm}`),
])

const SIGNATURE_NAMES: ReadonlySet<string> = new Set([
  'X-Amz-Algorithm', 'X-Amz-Credential', 'X-Amz-Date', 'X-Amz-Expires', 'X-Amz-SignedHeaders', 'X-Amz-Signature', 'X-Amz-Content-Sha256',
])

/** The operation a request asks for; undefined for one outside the table. `key` is empty for the bucket itself. */
export function findOperation(request: StorageRequest, key: string): OperationName | undefined {
  const query = new Map(request.query)
  const fits = (name: OperationName) => {
    const row = ROWS[name]
    return row.method === request.method
      && row.on === (key === '' ? 'bucket' : 'object')
      && Object.entries(row.needs).every(([need, value]) => query.has(need) && (value === '' || query.get(need) === value))
  }
  return operationNames().filter(fits).sort((a, b) => countNeeds(b) - countNeeds(a))[0]
}

function countNeeds(name: OperationName): number {
  return Object.keys(ROWS[name].needs).length
}

function operationNames(): OperationName[] {
  const isOperation = (name: string): name is OperationName => name in OPERATIONS
  return Object.keys(OPERATIONS).filter(isOperation)
}

/**
 * Refuses what the operation would have to obey and does not know, so that the product can never come to rely on a
 * parameter that is silently passed over here and works differently in the real store.
 */
export function refuseUnknownWishes(request: StorageRequest, operation: OperationName): void {
  const row = ROWS[operation]
  for (const [name, value] of request.query) {
    if (name in row.needs || row.allows.includes(name) || SIGNATURE_NAMES.has(name)) continue
    // The SDK names its own call in the address; a name that contradicts the call would be a wrong address.
    if (name === 'x-id' && value === operation) continue
    if (isKnownAmzName(name.toLowerCase())) continue
    throw new Refusal('parameter-not-implemented', `${operation}: ${name}=${value}`)
  }
  for (const name of request.headers.keys()) {
    if (name.startsWith('x-amz-') && !isKnownAmzName(name)) throw new Refusal('header-not-implemented', `${operation}: ${name}`)
  }
}

function isKnownAmzName(name: string): boolean {
  return KNOWN_AMZ_NAMES.has(name) || name.startsWith('x-amz-meta-')
}
