import type { Socket } from 'node:net'
import type { SMTPServerAddress, SMTPServerDataStream, SMTPServerSession } from 'smtp-server'
import { SMTPServer } from 'smtp-server'
import { isMailbox } from './address-rules'
import type { Fault, FaultBook, FaultStage } from './faults'
import { findMessageRefusal } from './message-rules'
import type { MessageStore } from './messages'
import { readSubject } from './messages'
import { refuse, SmtpRefusal } from './refusals'

export const MAX_MESSAGE_BYTES = 25 * 1024 * 1024
export const MAX_RECIPIENTS = 100

export interface SmtpParts {
  messages: MessageStore
  faults: FaultBook
  now: () => number
  /** Told of everything refused, on purpose or by rule, for the state page. */
  onRefused: (refused: { name: string, code: number, words: string }) => void
}

export interface SmtpListener {
  port: number
  close(): Promise<void>
}

interface Received {
  raw: Buffer
  texts: string[]
}

/** Never answers. A new one each time: what waits for a shared one would never be let go. */
function silence(): Promise<never> {
  return new Promise<never>(() => {})
}

function pause(ms: number): Promise<void> {
  return new Promise((resolve) => {
    setTimeout(resolve, ms).unref()
  })
}

function toError(cause: unknown): Error {
  return cause instanceof Error ? cause : new Error(String(cause))
}

/** Sockets by the client's port: the library hands out sessions, and a cut needs the socket under one. */
function trackSockets(server: SMTPServer): Map<number, Socket> {
  const sockets = new Map<number, Socket>()
  server.server.on('connection', (socket: Socket) => {
    const port = socket.remotePort
    if (port === undefined) return
    sockets.set(port, socket)
    socket.once('close', () => sockets.delete(port))
  })
  return sockets
}

type Strike = (at: FaultStage, texts: readonly string[], session: SMTPServerSession) => Promise<undefined>

/** Carries out the fault that was asked for, if any: throws an answer, is late, cuts, or never comes back. */
function createStrike(faults: FaultBook, cut: (session: SMTPServerSession) => void): Strike {
  async function carryOut(fault: Fault, session: SMTPServerSession): Promise<undefined> {
    if (fault.delayMs) await pause(fault.delayMs)
    if (fault.status === 'slow') return undefined
    if (fault.status === 'hang') return silence()
    if (fault.status === 'reset') {
      cut(session)
      return silence()
    }
    throw new SmtpRefusal(fault.status, `told to fail at ${fault.at}`, 'told-to-fail')
  }

  return async (at, texts, session) => {
    const fault = faults.take(at, texts)
    return fault && carryOut(fault, session)
  }
}

function createConversation(parts: SmtpParts, strike: Strike) {
  async function receive(stream: SMTPServerDataStream, session: SMTPServerSession): Promise<Received> {
    const recipients = session.envelope.rcptTo.map(recipient => recipient.address)
    const chunks: Buffer[] = []
    let texts: string[] | undefined
    for await (const chunk of stream) {
      if (!stream.sizeExceeded && Buffer.isBuffer(chunk)) chunks.push(chunk)
      if (texts || !Buffer.concat(chunks).includes('\r\n\r\n')) continue
      texts = [...recipients, await readSubject(Buffer.concat(chunks))]
      await strike('before-dot', texts, session)
    }
    if (stream.sizeExceeded) throw refuse('too-large')
    return { raw: Buffer.concat(chunks), texts: texts ?? recipients }
  }

  async function take(stream: SMTPServerDataStream, session: SMTPServerSession): Promise<string> {
    const { raw, texts } = await receive(stream, session)
    await strike('data', texts, session)
    const refusal = findMessageRefusal(raw, session.envelope.bodyType === '8bitmime')
    if (refusal) throw refusal
    const sender = session.envelope.mailFrom
    const envelope = {
      from: sender ? sender.address : '',
      to: session.envelope.rcptTo.map(recipient => recipient.address),
    }
    const message = await parts.messages.keep(raw, envelope, parts.now())
    await strike('after-dot', texts, session)
    return `OK: kept as message ${message.id}`
  }

  async function hearSender(address: SMTPServerAddress, session: SMTPServerSession): Promise<undefined> {
    await strike('mail', [address.address], session)
    if (address.args && address.args.SMTPUTF8 !== undefined) throw refuse('smtputf8-not-offered')
    // An empty sender is how a server reports a failed delivery; nobody writes such a letter from here.
    if (!isMailbox(address.address)) throw refuse('sender-not-an-address', address.address)
    return undefined
  }

  async function hearRecipient(address: SMTPServerAddress, session: SMTPServerSession): Promise<undefined> {
    await strike('rcpt', [address.address], session)
    if (!isMailbox(address.address)) throw refuse('recipient-not-an-address', address.address)
    if (session.envelope.rcptTo.length >= MAX_RECIPIENTS) throw refuse('too-many-recipients')
    return undefined
  }

  return { greet: (session: SMTPServerSession) => strike('connect', [''], session), hearSender, hearRecipient, take }
}

/** Answers the library's callback with the outcome of `work`; `silence` gives none. */
function settle(work: Promise<string | undefined>, parts: SmtpParts, callback: (error?: Error | null, words?: string) => void): void {
  work.then(
    words => callback(null, words),
    (cause: unknown) => {
      const error = toError(cause)
      if (error instanceof SmtpRefusal) {
        parts.onRefused({ name: error.refusalName, code: error.responseCode, words: error.message })
      }
      callback(error)
    },
  )
}

/** Listens on 127.0.0.1 only. @param port 0 for any free one */
export async function listenSmtp(port: number, parts: SmtpParts): Promise<SmtpListener> {
  const server = new SMTPServer({
    name: 'mail.turfnote.test',
    banner: 'stand-in',
    // Plain text on this machine alone: the library's built-in certificate would be refused by a careful client.
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: MAX_MESSAGE_BYTES,
    hideSMTPUTF8: true,
    disableReverseLookup: true,
    logger: false,
    socketTimeout: 120_000,
    closeTimeout: 1,
    onConnect: (session, callback) => settle(talk.greet(session), parts, callback),
    onMailFrom: (address, session, callback) => settle(talk.hearSender(address, session), parts, callback),
    onRcptTo: (address, session, callback) => settle(talk.hearRecipient(address, session), parts, callback),
    onData: (stream, session, callback) => settle(talk.take(stream, session), parts, callback),
  })
  const sockets = trackSockets(server)
  const talk = createConversation(parts, createStrike(parts.faults, session => sockets.get(session.remotePort)?.resetAndDestroy()))
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => {
      server.off('error', reject)
      resolve()
    })
  })
  // A client that vanishes in mid-message is that client's affair, not a reason to stop.
  server.on('error', () => {})
  const address = server.server.address()
  if (address === null || typeof address === 'string') throw new Error('the SMTP listener has no port')
  return {
    port: address.port,
    close: () => new Promise((resolve) => {
      server.close(() => resolve())
      for (const socket of sockets.values()) socket.destroy()
    }),
  }
}
