import type { IncomingMessage, Server, ServerResponse } from 'node:http'
import { createServer } from 'node:http'
import { ZodError } from 'zod'
import type { FaultBook } from './faults'
import { faultRequest } from './faults'
import type { MessageStore } from './messages'
import { htmlPartPage, INBOX_CSS, inboxPage, messagePage } from './pages'

export interface InboxParts {
  messages: MessageStore
  faults: FaultBook
  /** What `GET /__fake__/state` tells beside the messages and the faults. */
  describe: () => Record<string, unknown>
  reset: () => void
}

interface Reply {
  status: number
  type: string
  body: string
  /** Content-Security-Policy. */
  policy?: string
}

const PAGE_POLICY = 'default-src \'none\'; style-src \'self\'; frame-src \'self\'; form-action \'self\'; base-uri \'none\'; frame-ancestors \'none\''
/** Letters bring inline styles and nothing else: no script, no picture from elsewhere, no form. */
const PART_POLICY = 'default-src \'none\'; style-src \'unsafe-inline\'; img-src data:; form-action \'none\'; frame-ancestors \'self\'; sandbox allow-popups allow-popups-to-escape-sandbox'

const MAX_REQUEST_BYTES = 64 * 1024

const ANSWERED = [
  'GET /', 'GET /messages/:id', 'GET /messages/:id/html', 'GET /__fake__/state', 'GET /__fake__/messages?to=',
  'POST /__fake__/reset', 'POST /__fake__/fail',
]

function json(status: number, body: unknown): Reply {
  return { status, type: 'application/json; charset=utf-8', body: `${JSON.stringify(body, null, 2)}\n` }
}

function webPage(body: string): Reply {
  return { status: 200, type: 'text/html; charset=utf-8', body, policy: PAGE_POLICY }
}

function unknownRequest(method: string, path: string): Reply {
  const words = `The mail stand-in does not answer ${method} ${path}. Use one of: ${ANSWERED.join(', ')}; or add it to fakes/mail/inbox-http.ts.`
  process.stderr.write(`${words}\n`)
  return json(501, { error: 'unknown-request', message: words })
}

async function readBody(request: IncomingMessage): Promise<string> {
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of request) {
    if (!Buffer.isBuffer(chunk)) continue
    bytes += chunk.length
    if (bytes > MAX_REQUEST_BYTES) throw new RangeError(`the body is over ${MAX_REQUEST_BYTES} bytes`)
    chunks.push(chunk)
  }
  return Buffer.concat(chunks).toString('utf8')
}

async function addFault(request: IncomingMessage, faults: FaultBook): Promise<Reply> {
  try {
    const fault = faultRequest.parse(JSON.parse(await readBody(request)))
    faults.add(fault)
    return json(200, { ok: true, faults: faults.list() })
  }
  catch (cause) {
    if (cause instanceof ZodError) {
      return json(422, { error: 'not-a-fault', message: cause.issues.map(issue => `${issue.path.join('.')}: ${issue.message}`).join('; ') })
    }
    if (cause instanceof SyntaxError || cause instanceof RangeError) return json(400, { error: 'not-json', message: cause.message })
    throw cause
  }
}

function showMessage(parts: InboxParts, id: string, isHtmlPart: boolean): Reply {
  const message = parts.messages.find(id)
  if (!message) return json(404, { error: 'no-such-message', message: `There is no message ${id}; it may have been cleared by a reset.` })
  if (!isHtmlPart) return webPage(messagePage(message))
  if (message.html === null) return json(404, { error: 'no-html-part', message: `Message ${id} has no HTML part.` })
  return { ...webPage(htmlPartPage(message.html)), policy: PART_POLICY }
}

function showState(parts: InboxParts): Reply {
  return json(200, {
    ...parts.describe(),
    messages: parts.messages.list().length,
    forgotten: parts.messages.forgottenCount(),
    faults: parts.faults.list(),
  })
}

/** @param to whole address without regard to case; every message when null */
function listMessages(parts: InboxParts, to: string | null): Reply {
  const wanted = to?.toLowerCase()
  return json(200, parts.messages.list().filter(message =>
    wanted === undefined || message.envelope.to.some(address => address.toLowerCase() === wanted)))
}

function showInbox(parts: InboxParts, to: string): Reply {
  const part = to.trim().toLowerCase()
  return webPage(inboxPage(parts.messages.list().filter(message =>
    message.envelope.to.some(address => address.toLowerCase().includes(part))), to.trim()))
}

async function answer(request: IncomingMessage, parts: InboxParts): Promise<Reply> {
  const url = new URL(request.url ?? '/', 'http://127.0.0.1')
  const route = `${request.method ?? ''} ${url.pathname}`
  switch (route) {
    case 'GET /': return showInbox(parts, url.searchParams.get('to') ?? '')
    case 'GET /inbox.css': return { status: 200, type: 'text/css; charset=utf-8', body: INBOX_CSS }
    // Browsers ask for it unasked.
    case 'GET /favicon.ico': return { status: 204, type: 'image/x-icon', body: '' }
    case 'GET /__fake__/state': return showState(parts)
    case 'GET /__fake__/messages': return listMessages(parts, url.searchParams.get('to'))
    case 'POST /__fake__/fail': return addFault(request, parts.faults)
    case 'POST /__fake__/reset':
      parts.reset()
      return json(200, { ok: true })
  }
  const message = /^GET \/messages\/(\d+)(\/html)?$/.exec(route)
  if (message) return showMessage(parts, message[1] ?? '', message[2] !== undefined)
  return unknownRequest(request.method ?? '', url.pathname)
}

function send(response: ServerResponse, reply: Reply): void {
  response.writeHead(reply.status, {
    'content-type': reply.type,
    'cache-control': 'no-store',
    'x-content-type-options': 'nosniff',
    'referrer-policy': 'no-referrer',
    'content-security-policy': reply.policy ?? 'default-src \'none\'; frame-ancestors \'none\'',
  })
  response.end(reply.body)
}

/** Listens on 127.0.0.1 only. @param port 0 for any free one */
export async function listenInbox(port: number, parts: InboxParts): Promise<Server> {
  const server = createServer((request, response) => {
    answer(request, parts).then(reply => send(response, reply), (cause: unknown) => {
      send(response, json(500, { error: 'stand-in-broken', message: String(cause) }))
    })
  })
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => {
      server.off('error', reject)
      resolve()
    })
  })
  return server
}
