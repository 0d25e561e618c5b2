import type { Answer } from './answer'
import { authenticate } from './authenticate'
import type { Call } from './call'
import { answerPreflight } from './cors'
import { listMultipartUploads, listObjects, listParts } from './listings'
import { abortMultipartUpload, completeMultipartUpload, createMultipartUpload, uploadPart } from './multipart'
import { deleteObject, getObject, putObject } from './objects'
import type { OperationName } from './operations'
import { findOperation, refuseUnknownWishes } from './operations'
import { BodyReceiver } from './receive'
import { Refusal } from './refusals'
import type { StorageRequest } from './request'
import { splitPath } from './request'
import type { Service } from './service'

const MAX_KEY_BYTES = 1024

const HANDLERS: Readonly<Record<OperationName, (call: Call) => Promise<Answer>>> = {
  CreateMultipartUpload: createMultipartUpload,
  CompleteMultipartUpload: completeMultipartUpload,
  UploadPart: uploadPart,
  ListParts: listParts,
  AbortMultipartUpload: abortMultipartUpload,
  ListMultipartUploads: listMultipartUploads,
  PutObject: putObject,
  GetObject: getObject,
  HeadObject: getObject,
  DeleteObject: deleteObject,
  ListObjectsV2: listObjects,
  HeadBucket: headBucket,
}

/** The name a request is counted under; what is outside the table counts as such. */
export function nameOfRequest(request: StorageRequest): string {
  if (request.method === 'OPTIONS') return 'Preflight'
  return findOperation(request, splitPath(request.path).key) ?? 'Unknown'
}

/**
 * Serves one request of the S3 protocol, or throws the Refusal the service would answer with. The signature is judged
 * before anything else, so that a stranger learns nothing of buckets and keys.
 */
export async function perform(
  service: Service, request: StorageRequest, connection: { acceptBody: () => void, cutAfterBytes: number | undefined },
): Promise<Answer> {
  const { settings, objects, uploads } = service
  if (request.method === 'OPTIONS') return answerPreflight(request, settings.allowedOrigins)
  const nowMs = settings.now()
  const { payloadHash } = authenticate(request, settings.credentials, nowMs)
  const { bucket, key } = splitPath(request.path)
  const operation = findOperation(request, key)
  if (bucket === '' || operation === undefined) throw new Refusal('operation-not-implemented', `${request.method} ${request.target}`)
  if (bucket !== settings.bucket) throw new Refusal('no-such-bucket', '', { BucketName: bucket })
  if (Buffer.byteLength(key) > MAX_KEY_BYTES) {
    throw new Refusal('key-too-long', '', { Size: String(Buffer.byteLength(key)), MaxSizeAllowed: String(MAX_KEY_BYTES) })
  }
  refuseUnknownWishes(request, operation)
  const body = new BodyReceiver(request, payloadHash, connection.acceptBody, connection.cutAfterBytes)
  return HANDLERS[operation]({ request, bucket, key, body, objects, uploads, dataDir: settings.dataDir, nowMs })
}

async function headBucket(call: Call): Promise<Answer> {
  await call.body.toText()
  return { status: 200, headers: {} }
}
