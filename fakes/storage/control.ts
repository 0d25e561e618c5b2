import { z } from 'zod'
import type { Answer } from './answer'
import { failureSchema } from './failures'
import type { StorageRequest } from './request'
import type { Service } from './service'

export const CONTROL_PREFIX = '/__fake__/'

const MAX_ORDER_BYTES = 64 * 1024
const DOORS = [
  'GET /__fake__/state: objects, uploads with their parts, requests by operation, refusals by row, failures still ordered',
  'POST /__fake__/reset: forget everything and let go of hanging requests',
  'POST /__fake__/fail { match, times, status | hang: true | reset: true [afterBytes | afterCommit: true] }: fail on purpose',
]

/** The side door for tests and checks; it is no part of the S3 protocol and asks for no signature. */
export async function answerControl(service: Service, request: StorageRequest): Promise<Answer> {
  const door = `${request.method} ${request.path}`
  if (door === 'GET /__fake__/state') return jsonAnswer(200, describeState(service))
  if (door === 'POST /__fake__/reset') {
    await service.reset()
    return jsonAnswer(200, { reset: true })
  }
  if (door === 'POST /__fake__/fail') return orderFailure(service, await readText(request))
  return jsonAnswer(404, { message: `${door} does not exist here`, exists: DOORS })
}

function orderFailure(service: Service, text: string): Answer {
  const order = failureSchema.safeParse(parseJson(text))
  if (!order.success) {
    return jsonAnswer(422, { message: z.prettifyError(order.error), exists: DOORS })
  }
  service.failures.add(order.data)
  return jsonAnswer(200, { failures: service.failures.list() })
}

/** Undefined for text that is not JSON; the schema then says what was expected. */
function parseJson(text: string): unknown {
  try {
    const parsed: unknown = JSON.parse(text)
    return parsed
  }
  catch {
    return undefined
  }
}

function describeState(service: Service): object {
  return {
    bucket: service.settings.bucket,
    region: service.settings.credentials.region,
    objects: service.objects.list().map(({ bodyFile: _, ...record }) => record),
    uploads: service.uploads.list().map(upload => ({
      ...upload,
      parts: service.uploads.listParts(upload.uploadId, upload.key).map(({ bodyFile: _, ...part }) => part),
    })),
    requests: Object.fromEntries(service.requestCounts),
    refusals: Object.fromEntries(service.refusalCounts),
    hanging: service.hanging.size,
    failures: service.failures.list(),
  }
}

async function readText(request: StorageRequest): Promise<string> {
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of request.incoming) {
    const piece: unknown = chunk
    if (!Buffer.isBuffer(piece)) continue
    bytes += piece.length
    if (bytes <= MAX_ORDER_BYTES) chunks.push(piece)
  }
  return Buffer.concat(chunks).toString('utf8')
}

function jsonAnswer(status: number, value: object): Answer {
  return { status, headers: { 'Content-Type': 'application/json' }, body: `${JSON.stringify(value, null, 2)}\n` }
}
