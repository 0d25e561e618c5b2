import { isMailbox } from './address-rules'
import type { SmtpRefusal } from './refusals'
import { refuse } from './refusals'

export const MAX_LINE_OCTETS = 998

const CR = 13
const LF = 10

/** Headers that RFC 5322 3.6 and MIME (RFC 2045) allow once. */
export const SINGLE_HEADERS = [
  'date', 'from', 'sender', 'reply-to', 'to', 'cc', 'bcc', 'message-id', 'in-reply-to', 'references', 'subject',
  'mime-version', 'content-type', 'content-transfer-encoding',
] as const

export interface HeaderLine {
  /** In lower case. */
  name: string
  /** Unfolded, not decoded. */
  value: string
}

interface Head {
  lines: HeaderLine[]
  malformed?: string
}

/** Where the header block ends in the raw message; the whole length when there is no body. */
export function headLength(raw: Buffer): number {
  const end = raw.indexOf('\r\n\r\n')
  return end < 0 ? raw.length : end
}

/** The header block as unfolded lines; `malformed` is the first line that is neither a header nor a continuation. */
export function readHead(raw: Buffer): Head {
  const lines: HeaderLine[] = []
  for (const line of raw.subarray(0, headLength(raw)).toString('latin1').split('\r\n')) {
    const last = lines.at(-1)
    if (/^[ \t]/.test(line) && last) {
      last.value = (last.value + line).trim()
      continue
    }
    const parts = /^([!-9;-~]+)[ \t]*:(.*)$/s.exec(line)
    if (!parts) {
      if (line !== '') return { lines, malformed: line }
      continue
    }
    lines.push({ name: (parts[1] ?? '').toLowerCase(), value: (parts[2] ?? '').trim() })
  }
  return { lines }
}

function findOctetRefusal(raw: Buffer, isEightBitDeclared: boolean): SmtpRefusal | undefined {
  const bodyStart = headLength(raw)
  let lineStart = 0
  for (let index = 0; index < raw.length; index++) {
    const octet = raw[index]
    if (octet === 0) return refuse('nul-octet', `at octet ${index}`)
    if (octet === CR && raw[index + 1] !== LF) return refuse('bare-carriage-return', `at octet ${index}`)
    if (octet === LF) {
      if (raw[index - 1] !== CR) return refuse('bare-line-feed', `at octet ${index}`)
      if (index - 1 - lineStart > MAX_LINE_OCTETS) return refuse('line-too-long', `${index - 1 - lineStart} octets`)
      lineStart = index + 1
    }
    if (octet !== undefined && octet > 127) {
      if (index < bodyStart) return refuse('header-not-ascii', `at octet ${index}`)
      if (!isEightBitDeclared) return refuse('body-eight-bit-undeclared', `at octet ${index}`)
    }
  }
  return raw.length - lineStart > MAX_LINE_OCTETS ? refuse('line-too-long', `${raw.length - lineStart} octets`) : undefined
}

function findHeaderRefusal(head: Head): SmtpRefusal | undefined {
  if (head.malformed !== undefined) return refuse('header-malformed', head.malformed)
  for (const name of SINGLE_HEADERS) {
    if (head.lines.filter(line => line.name === name).length > 1) return refuse('header-twice', name)
  }
  const valueOf = (name: string) => head.lines.find(line => line.name === name)?.value
  const date = valueOf('date')
  if (date === undefined) return refuse('date-missing')
  if (Number.isNaN(Date.parse(date))) return refuse('date-unreadable', date)
  const from = valueOf('from')
  if (from === undefined) return refuse('from-missing')
  const address = /<([^<>]*)>\s*$/.exec(from)?.[1] ?? from
  if (!isMailbox(address)) return refuse('from-not-an-address', from)
  const messageId = valueOf('message-id')
  if (messageId === undefined) return refuse('message-id-missing')
  if (!/^<[^\s<>@]+@[^\s<>@]+>$/.test(messageId)) return refuse('message-id-malformed', messageId)
  return undefined
}

/**
 * The first reason to refuse a message as it came over the wire (dots already unstuffed), or undefined.
 * One pass over the octets, then the headers.
 */
export function findMessageRefusal(raw: Buffer, isEightBitDeclared: boolean): SmtpRefusal | undefined {
  return findOctetRefusal(raw, isEightBitDeclared) ?? findHeaderRefusal(readHead(raw))
}
