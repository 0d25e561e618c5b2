import type { IncomingMessage, Server, ServerResponse } from 'node:http'
import { randomBytes } from 'node:crypto'
import { createServer } from 'node:http'
import type { Answer } from './answer'
import { discardAnswer, refusalAnswer, sendAnswer } from './answer'
import { answerControl, CONTROL_PREFIX } from './control'
import type { AllowedOrigins } from './cors'
import { corsHeaders } from './cors'
import { refusalForStatus } from './failures'
import { nameOfRequest, perform } from './perform'
import { CutOnPurpose } from './receive'
import { Refusal } from './refusals'
import type { StorageRequest } from './request'
import { readRequest } from './request'
import { Service } from './service'

export interface StorageOptions {
  /** 0 for any free port. */
  port: number
  /** Made if it does not exist; what an earlier run stored there is served again. */
  dataDir: string
  bucket: string
  region: string
  accessKey: string
  secretKey: string
  /** Origins whose pages may use the bucket; all of them by default. */
  allowedOrigins?: AllowedOrigins
  /** UTC epoch ms; the real time by default. */
  now?: () => number
}

export interface RunningStorage {
  url: string
  port: number
  /** Stops listening and cuts open connections; what is stored stays in `dataDir`. */
  close(): Promise<void>
}

/** Starts the S3-compatible stand-in on 127.0.0.1, with one bucket and one pair of keys. Rejects when the port is taken. */
export async function startStorage(options: StorageOptions): Promise<RunningStorage> {
  const service = await Service.open({
    dataDir: options.dataDir,
    bucket: options.bucket,
    credentials: { accessKey: options.accessKey, secretKey: options.secretKey, region: options.region },
    allowedOrigins: options.allowedOrigins ?? '*',
    now: options.now ?? Date.now,
  })
  const handle = (incoming: IncomingMessage, response: ServerResponse) => void serve(service, incoming, response)
  // A large film on a slow line takes longer than node's five minutes for a whole request; and node's five seconds of
  // idling would end a kept connection just as a busy client takes it up again.
  const server = createServer({ requestTimeout: 0, keepAliveTimeout: 60_000 }, handle)
  // Without this node would ask for the body before the signature was judged.
  server.on('checkContinue', handle)
  const port = await listen(server, options.port)
  return { url: `http://127.0.0.1:${port}`, port, close: () => stop(server, service) }
}

async function serve(service: Service, incoming: IncomingMessage, response: ServerResponse): Promise<void> {
  const requestId = randomBytes(8).toString('hex').toUpperCase()
  let answer: Answer | undefined
  try {
    const request = readRequest(incoming)
    answer = await answerRequest(service, request, response, requestId)
    if (answer) await sendAnswer(response, request.method, addHeaders(answer, corsHeaders(request, service.settings.allowedOrigins), requestId))
  }
  catch (error) {
    if (!(error instanceof Refusal) || response.headersSent) return void response.destroy()
    service.countRefusal(error.row)
    await sendAnswer(response, incoming.method ?? '', addHeaders(refusalAnswer(error, incoming.url ?? '/', requestId), {}, requestId))
  }
}

/** The answer to send, or undefined when there is to be none: a request left hanging, or a connection cut. */
async function answerRequest(
  service: Service, request: StorageRequest, response: ServerResponse, requestId: string,
): Promise<Answer | undefined> {
  if (request.path.startsWith(CONTROL_PREFIX)) return answerControl(service, request)
  service.countRequest(nameOfRequest(request))
  const failure = service.failures.findAndUse(request.method, request.target)
  try {
    if (failure?.hang) return void leaveHanging(service, response)
    if (failure?.status !== undefined) {
      const ordered = new Refusal(refusalForStatus(failure.status), 'ordered by a test')
      service.countRefusal(ordered.row)
      return { ...refusalAnswer(ordered, request.target, requestId), status: failure.status }
    }
    if (failure?.reset && !failure.afterBytes && !failure.afterCommit) throw new CutOnPurpose()
    const answer = await perform(service, request, {
      acceptBody: () => request.headers.has('expect') && response.writeContinue(),
      cutAfterBytes: failure?.afterBytes,
    })
    if (!failure?.afterCommit) return answer
    discardAnswer(answer)
    throw new CutOnPurpose()
  }
  catch (error) {
    if (error instanceof CutOnPurpose || isGone(request)) return void response.destroy()
    const refusal = error instanceof Refusal ? error : new Refusal('internal-error', String(error))
    service.countRefusal(refusal.row)
    return refusalAnswer(refusal, request.target, requestId)
  }
}

/** Whether the client left while its body was awaited: there is nobody to answer. */
function isGone(request: StorageRequest): boolean {
  return request.incoming.destroyed && !request.incoming.complete
}

function leaveHanging(service: Service, response: ServerResponse): void {
  service.hanging.add(response)
  response.once('close', () => service.hanging.delete(response))
}

function addHeaders(answer: Answer, cors: Record<string, string>, requestId: string): Answer {
  return { ...answer, headers: { 'x-amz-request-id': requestId, 'Server': 'turfnote-fake-storage', ...cors, ...answer.headers } }
}

async function listen(server: Server, port: number): Promise<number> {
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => {
      server.off('error', reject)
      resolve()
    })
  })
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('The storage stand-in has no port.')
  return address.port
}

async function stop(server: Server, service: Service): Promise<void> {
  service.releaseHanging()
  const closed = new Promise<void>(resolve => server.close(() => resolve()))
  server.closeAllConnections()
  await closed
}
