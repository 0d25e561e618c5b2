import { once } from 'node:events'
import type { Socket } from 'node:net'
import { connect } from 'node:net'
import type { LoadRequest } from './job'

export interface LoadAnswer {
  status: number
  body: string
}

const HEAD_END = '\r\n\r\n'

/**
 * One kept-alive connection that sends a request at a time. On a bare socket, because node's own client takes about as long for a request
 * as a small server does, and then the load would be what is measured.
 */
export class LoadConnection {
  private received: Buffer = Buffer.alloc(0)
  private waiting: { resolve: (answer: LoadAnswer) => void, reject: (error: Error) => void } | undefined

  private constructor(private readonly socket: Socket) {
    socket.on('data', chunk => this.take(chunk))
    socket.on('error', error => this.waiting?.reject(error))
    socket.on('close', () => this.waiting?.reject(new Error('The server closed a kept-alive connection.')))
  }

  static async open(port: number): Promise<LoadConnection> {
    const socket = connect({ host: '127.0.0.1', port, noDelay: true })
    await once(socket, 'connect')
    return new LoadConnection(socket)
  }

  send(bytes: Buffer): Promise<LoadAnswer> {
    return new Promise((resolve, reject) => {
      this.waiting = { resolve, reject }
      this.socket.write(bytes)
    })
  }

  close(): void {
    this.socket.destroy()
  }

  private take(chunk: Buffer): void {
    this.received = this.received.length === 0 ? chunk : Buffer.concat([this.received, chunk])
    const headEnd = this.received.indexOf(HEAD_END)
    if (headEnd === -1) return
    const head = this.received.toString('latin1', 0, headEnd)
    const length = /^content-length: *(\d+)$/im.exec(head)?.[1]
    const bodyStart = headEnd + HEAD_END.length
    // Both servers under load send whole answers; another kind would be counted wrongly in silence.
    if (length === undefined) {
      this.waiting?.reject(new Error(`An answer without Content-Length:\n${head}`))
      return
    }
    if (this.received.length < bodyStart + Number(length)) return
    const { waiting } = this
    const answer = { status: Number(head.slice(9, 12)), body: this.received.toString('utf8', bodyStart) }
    this.waiting = undefined
    this.received = Buffer.alloc(0)
    waiting?.resolve(answer)
  }
}

export function requestBytes({ method, path, headers, body }: LoadRequest, port: number): Buffer {
  const all = { host: `127.0.0.1:${port}`, ...headers, ...(method === 'POST' ? { 'content-length': String(Buffer.byteLength(body)) } : {}) }
  const lines = Object.entries(all).map(([name, value]) => `${name}: ${value}`)
  return Buffer.from(`${method} ${path} HTTP/1.1\r\n${lines.join('\r\n')}${HEAD_END}${body}`)
}
