import type { IncomingMessage, ServerResponse } from 'node:http'
import { once } from 'node:events'
import { createServer } from 'node:http'

/** What the store does instead of answering properly. */
export type StoreFault = { status: number } | 'hang' | 'cut' | 'ignore-ranges'

/** A store of a few objects in memory on 127.0.0.1 that answers ranges, counts what it sends and fails when told. */
export interface RangeServer {
  put: (name: string, bytes: Uint8Array) => string
  sentBytes: (name: string) => number
  /** Most requests that were open at once. */
  maxOpen: () => number
  fault: StoreFault | undefined
  /** Answers wait for this. */
  hold: Promise<void> | undefined
  close: () => Promise<void>
}

export async function startRangeServer(): Promise<RangeServer> {
  const objects = new Map<string, Uint8Array>()
  const sent = new Map<string, number>()
  let openCount = 0
  let openMax = 0
  const http = createServer((request, response) => {
    openMax = Math.max(openMax, ++openCount)
    response.once('close', () => openCount--)
    void Promise.resolve(server.hold).then(() => answer(request, response))
  })

  function answer(request: IncomingMessage, response: ServerResponse): void {
    const name = decodeURIComponent((request.url ?? '').slice(1))
    const bytes = objects.get(name)
    if (server.fault === 'hang')
      return
    if (typeof server.fault === 'object' || !bytes) {
      response.writeHead(typeof server.fault === 'object' ? server.fault.status : 404).end('<Error/>')
      return
    }
    if (server.fault === 'ignore-ranges') {
      response.writeHead(200, { 'content-length': bytes.length }).end(bytes)
      return
    }
    const range = /^bytes=(\d+)-(\d+)$/.exec(request.headers.range ?? '')
    const [from, to] = [Number(range?.[1]), Math.min(Number(range?.[2]), bytes.length - 1)]
    if (!range || from > to) {
      response.writeHead(416, { 'content-range': `bytes */${bytes.length}` }).end()
      return
    }
    response.writeHead(206, { 'content-range': `bytes ${from}-${to}/${bytes.length}`, 'content-length': to - from + 1 })
    if (server.fault === 'cut') {
      response.write(bytes.subarray(from, from + 1), () => response.destroy())
      return
    }
    sent.set(name, (sent.get(name) ?? 0) + to - from + 1)
    response.end(bytes.subarray(from, to + 1))
  }

  http.listen(0, '127.0.0.1')
  await once(http, 'listening')
  const address = http.address()
  const port = typeof address === 'object' && address ? address.port : 0
  const server: RangeServer = {
    put: (name, bytes) => {
      objects.set(name, bytes)
      sent.set(name, 0)
      return `http://127.0.0.1:${port}/${encodeURIComponent(name)}`
    },
    sentBytes: name => sent.get(name) ?? 0,
    maxOpen: () => openMax,
    fault: undefined,
    hold: undefined,
    close: async () => {
      http.closeAllConnections()
      http.close()
      await once(http, 'close')
    },
  }
  return server
}
