import type { NodemailerError } from 'nodemailer'
import { createTransport } from 'nodemailer'

export interface OutgoingMail {
  /** `left@right`, with or without angle brackets. The same for every attempt at one letter: it is how a double is known. */
  messageId: string
  to: { name: string, address: string }
  subject: string
  text: string
  html: string
  /** Further headers, like `List-Unsubscribe`; none that the letter has already. */
  headers?: Record<string, string>
  date: Date
}

export type SendResult
  = { kind: 'sent' }
    /** Worth another attempt later. */
    | { kind: 'refused-for-now', reason: string }
    /** Another attempt would get the same answer. */
    | { kind: 'refused-for-good', reason: string }

export interface Mailer {
  /**
   * One attempt at one letter to one reader; never throws. `sent` means that the server took it on. A cut after the final
   * dot is `refused-for-now` although the server may have the letter: the next attempt is then a double with the same
   * Message-ID. `reason` is one line for logs and lists, without anyone's address.
   */
  send(message: OutgoingMail): Promise<SendResult>
  /** Lets letters on their way finish, then hangs up. */
  close(): void
}

export interface MailerOptions {
  /** `smtp://[user:password@]host:port`, or `smtps://` */
  smtpUrl: string
  /** `Name <address>`, or the address alone. */
  from: string
  /** How long any one step may be silent. */
  stepTimeoutMs?: number
}

const STEP_TIMEOUT_MS = 10_000
/** Bounds a server that trickles its answers, which no step time-out sees. */
const STEPS_PER_SEND = 6

const ADDRESS = /^[\w.!#$%&'*+/=?^`{|}~-]+@[\p{L}\p{N}](?:[\p{L}\p{N}.-]*[\p{L}\p{N}])?$/u
const MESSAGE_ID = /^<?([^\s<>@]+@[^\s<>@]+)>?$/
// eslint-disable-next-line no-control-regex
const CONTROLS = /[\u0000-\u001F\u007F-\u009F\u2028\u2029]+/g

/** Headers that the letter itself gives, and those that would add readers or change who it is from. */
const OWN_HEADERS = new Set([
  'from', 'sender', 'reply-to', 'to', 'cc', 'bcc', 'subject', 'date', 'message-id', 'return-path', 'received',
  'resent-to', 'resent-cc', 'resent-bcc', 'resent-from', 'resent-date', 'resent-sender', 'resent-message-id',
])

/** A header value on one line: a break in it would start a header of its own. */
function headerText(text: string): string {
  return text.replace(CONTROLS, ' ').trim()
}

function parseSender(from: string): { name: string, address: string } {
  const parts = /^\s*(?:"?([^"<>]*?)"?\s*<([^<>\s]+)>|([^<>\s]+))\s*$/.exec(from)
  const address = parts?.[2] ?? parts?.[3] ?? ''
  if (!ADDRESS.test(address)) throw new TypeError('MAIL_FROM must be "Name <address>" or an address')
  return { name: headerText(parts?.[1] ?? ''), address }
}

/** Why a letter cannot be sent as it is, whatever the server says. */
function findFlaw(message: OutgoingMail): string | undefined {
  if (!ADDRESS.test(message.to.address) || message.to.address.length > 254) return 'the reader\'s address is no address'
  if (!MESSAGE_ID.test(message.messageId)) return 'the Message-ID is not of the form left@right'
  if (Number.isNaN(message.date.getTime())) return 'the date is no date'
  for (const name of Object.keys(message.headers ?? {})) {
    const isOwn = OWN_HEADERS.has(name.toLowerCase()) || /^(?:content-|mime-)/i.test(name)
    if (isOwn || !/^[A-Za-z][A-Za-z0-9-]*$/.test(name)) return `the header ${JSON.stringify(name.slice(0, 60))} may not be set`
  }
  return undefined
}

/** The steps whose refusal is about this letter; one at any other step is about the connection or our sign-in. */
const LETTER_STEPS = new Set(['MAIL FROM', 'RCPT TO', 'DATA'])

function isRefusedForGood(error: NodemailerError): boolean {
  if (error.responseCode === undefined) return error.code === 'EENVELOPE' || error.code === 'EMESSAGE'
  return error.responseCode >= 500 && error.permanent !== false && LETTER_STEPS.has(error.command ?? '')
}

/** Servers repeat the address they refuse, and reasons are logged. */
function reasonText(words: string): string {
  return headerText(words).replace(/<?[^\s<>"]+@[^\s<>"]+>?/g, '[address]').slice(0, 300)
}

function toResult(cause: unknown): SendResult {
  if (!(cause instanceof Error)) return { kind: 'refused-for-now', reason: reasonText(String(cause)) }
  const error: NodemailerError = cause
  const reason = reasonText(error.response ?? error.message)
  return { kind: isRefusedForGood(error) ? 'refused-for-good' : 'refused-for-now', reason }
}

/**
 * Sends letters over SMTP, several connections kept open. Network faults and answers 4xx are for now; 5xx to the sender, the
 * recipient or the letter is for good; 5xx to the connection or the sign-in speaks of us, not of the letter, and is for now.
 *
 * @throws {TypeError} when `from` holds no address or `smtpUrl` is not smtp or smtps
 */
export function createMailer({ smtpUrl, from, stepTimeoutMs = STEP_TIMEOUT_MS }: MailerOptions): Mailer {
  if (!URL.canParse(smtpUrl) || !['smtp:', 'smtps:'].includes(new URL(smtpUrl).protocol)) {
    throw new TypeError('SMTP_URL must be smtp://host:port or smtps://host:port')
  }
  const sender = parseSender(from)
  const transport = createTransport({
    url: smtpUrl,
    pool: true,
    // The outbox alone tries again: an attempt here is one attempt, with one answer.
    maxRequeues: 0,
    // Shorter than servers keep an idle connection, so that a letter never meets one that was just closed.
    idleTimeout: 30_000,
    connectionTimeout: stepTimeoutMs,
    greetingTimeout: stepTimeoutMs,
    socketTimeout: stepTimeoutMs,
    dnsTimeout: stepTimeoutMs,
    disableFileAccess: true,
    disableUrlAccess: true,
  })
  // The pool also reports a broken connection here; whoever was sending over it has the same error already.
  transport.on('error', () => {})

  return {
    send: async (message) => {
      const flaw = findFlaw(message)
      if (flaw) return { kind: 'refused-for-good', reason: flaw }
      const { address } = message.to
      const headers = Object.entries(message.headers ?? {}).map(([key, value]) => ({ key, value: headerText(value) }))
      try {
        await transport.sendMail({
          messageId: `<${MESSAGE_ID.exec(message.messageId)?.[1] ?? ''}>`,
          from: sender,
          to: { name: headerText(message.to.name), address },
          // Said outright, so that no name or header can ever add a reader.
          envelope: { from: sender.address, to: [address] },
          subject: headerText(message.subject),
          text: message.text,
          html: message.html,
          // Keeps holiday answers away (RFC 3834).
          headers: [{ key: 'Auto-Submitted', value: 'auto-generated' }, ...headers],
          date: message.date,
          xMailer: false,
          signal: AbortSignal.timeout(stepTimeoutMs * STEPS_PER_SEND),
        })
        return { kind: 'sent' }
      }
      catch (cause) {
        return toResult(cause)
      }
    },
    close: () => transport.close(),
  }
}
