import { subscribe, unsubscribe } from 'node:diagnostics_channel'
import { IncomingMessage, Server, ServerResponse } from 'node:http'

/** One part as the store saw it come: a number may come several times. */
export interface SeenPut {
  number: number
  state: 'under-way' | 'arrived' | 'broken'
}

/** Watches a store from its own side of the line, and cuts that line. */
export interface Line {
  /** Every PUT of a part in the order of arrival. */
  puts: readonly SeenPut[]
  underWay(): number[]
  arrived(): number[]
  /** Those that the line or the page broke off. */
  broken(): number[]
  /** Breaks every connection that a part is coming over, as a tunnel does. @returns numbers of those parts */
  cut(): number[]
  close(): void
}

const CHANNEL = 'http.server.request.start'

/** @param port of a store stand-in that runs in this process */
export function watchLine(port: number): Line {
  const puts: SeenPut[] = []
  const open = new Map<SeenPut, IncomingMessage>()
  const see = (message: unknown) => {
    const found = readMessage(message)
    if (found?.port !== port || found.request.method !== 'PUT') return
    const { request, response } = found
    const put: SeenPut = { number: Number(new URL(request.url ?? '', 'http://store').searchParams.get('partNumber')), state: 'under-way' }
    puts.push(put)
    open.set(put, request)
    response.once('close', () => {
      put.state = response.writableFinished && response.statusCode === 200 ? 'arrived' : 'broken'
      open.delete(put)
    })
  }
  subscribe(CHANNEL, see)
  const numbersOf = (state: SeenPut['state']) => puts.filter(put => put.state === state).map(put => put.number)
  return {
    puts,
    underWay: () => numbersOf('under-way'),
    arrived: () => numbersOf('arrived'),
    broken: () => numbersOf('broken'),
    cut() {
      const numbers = numbersOf('under-way')
      for (const request of open.values()) request.socket.resetAndDestroy()
      return numbers
    },
    close: () => void unsubscribe(CHANNEL, see),
  }
}

function readMessage(message: unknown) {
  if (typeof message !== 'object' || message === null) return undefined
  const server: unknown = Reflect.get(message, 'server')
  const request: unknown = Reflect.get(message, 'request')
  const response: unknown = Reflect.get(message, 'response')
  if (!(server instanceof Server) || !(request instanceof IncomingMessage) || !(response instanceof ServerResponse)) return undefined
  const address = server.address()
  return typeof address === 'object' ? { port: address?.port, request, response } : undefined
}
