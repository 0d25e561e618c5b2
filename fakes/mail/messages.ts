import { appendFileSync, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'
import type { AddressObject, EmailAddress } from 'mailparser'
import { simpleParser } from 'mailparser'
import { z } from 'zod'
import { readHead } from './message-rules'

/** Older messages are forgotten beyond this many, so that a long load test does not fill the memory. */
export const MAX_KEPT_MESSAGES = 20_000

const mailAddress = z.strictObject({ name: z.string(), address: z.string() })

const keptMessage = z.strictObject({
  id: z.string(),
  envelope: z.strictObject({ from: z.string(), to: z.array(z.string()) }),
  from: mailAddress.nullable(),
  to: z.array(mailAddress),
  subject: z.string(),
  messageId: z.string(),
  /** The Date header in ISO 8601. */
  date: z.string(),
  /** By lower-case name, unfolded, not decoded; a header that stands several times is joined by line feeds. */
  headers: z.record(z.string(), z.string()),
  text: z.string().nullable(),
  html: z.string().nullable(),
  /** Addresses found in the text part, in order, each once. */
  links: z.array(z.string()),
  receivedAtMs: z.int(),
})

export type KeptMessage = z.infer<typeof keptMessage>

export interface MessageStore {
  /** Parses and keeps one accepted message, and answers it with its number as `id`. */
  keep(raw: Buffer, envelope: KeptMessage['envelope'], receivedAtMs: number): Promise<KeptMessage>
  /** Oldest first. */
  list(): readonly KeptMessage[]
  find(id: string): KeptMessage | undefined
  /** How many have been forgotten since the last `clear`. */
  forgottenCount(): number
  clear(): void
}

/** Every http(s) address in a text, once each; punctuation that ends a sentence is not part of it. */
export function findLinks(text: string): string[] {
  const found = text.match(/https?:\/\/[^\s<>"]+/g) ?? []
  return [...new Set(found.map(link => link.replace(/[.,;:!?)\]'’]+$/, '')))]
}

function flatten(header: AddressObject | AddressObject[] | undefined): KeptMessage['to'] {
  const entries: EmailAddress[] = (Array.isArray(header) ? header : header ? [header] : []).flatMap(part => part.value)
  return entries
    .flatMap(entry => entry.group ?? [entry])
    .flatMap(entry => entry.address ? [{ name: entry.name, address: entry.address }] : [])
}

function headersOf(raw: Buffer): Record<string, string> {
  const headers = new Map<string, string>()
  for (const { name, value } of readHead(raw).lines) {
    const before = headers.get(name)
    headers.set(name, before === undefined ? value : `${before}\n${value}`)
  }
  return Object.fromEntries(headers)
}

async function parse(raw: Buffer): Promise<Omit<KeptMessage, 'id' | 'envelope' | 'receivedAtMs'>> {
  // Only what was really sent: no text made from the HTML, no HTML made from the text.
  const mail = await simpleParser(raw, { skipHtmlToText: true, skipTextToHtml: true, skipImageLinks: true })
  const text = mail.text ?? null
  return {
    from: flatten(mail.from)[0] ?? null,
    to: flatten(mail.to),
    subject: mail.subject ?? '',
    messageId: mail.messageId ?? '',
    date: mail.date?.toISOString() ?? '',
    headers: headersOf(raw),
    text,
    html: mail.html === false ? null : mail.html ?? null,
    links: findLinks(text ?? ''),
  }
}

/** The subject of a message of which at least the header block is there, decoded. */
export async function readSubject(raw: Buffer): Promise<string> {
  return (await simpleParser(raw, { skipHtmlToText: true, skipTextToHtml: true })).subject ?? ''
}

function load(statePath: string): KeptMessage[] {
  if (!existsSync(statePath)) return []
  const lines = readFileSync(statePath, 'utf8').split('\n')
  // The last line is empty, or half a message when the process was killed while writing it: it was never answered 250.
  return lines.slice(0, -1).slice(-MAX_KEPT_MESSAGES).map(line => keptMessage.parse(JSON.parse(line)))
}

function save(statePath: string, messages: readonly KeptMessage[]): void {
  mkdirSync(dirname(statePath), { recursive: true })
  writeFileSync(statePath, messages.map(message => `${JSON.stringify(message)}\n`).join(''))
}

/**
 * @param statePath a file with one message a line, read again on the next start; kept in memory only when undefined
 * @throws when the file holds a whole line that is no message
 */
export function createMessageStore(statePath: string | undefined): MessageStore {
  let messages: KeptMessage[] = []
  if (statePath !== undefined) {
    messages = load(statePath)
    save(statePath, messages)
  }
  let lastNumber = Number(messages.at(-1)?.id ?? 0)
  let forgotten = 0
  return {
    keep: async (raw, envelope, receivedAtMs) => {
      const parsed = await parse(raw)
      lastNumber += 1
      const message: KeptMessage = { id: String(lastNumber), envelope, ...parsed, receivedAtMs }
      if (statePath !== undefined) appendFileSync(statePath, `${JSON.stringify(message)}\n`)
      messages.push(message)
      if (messages.length > MAX_KEPT_MESSAGES) {
        messages.shift()
        forgotten += 1
      }
      return message
    },
    list: () => messages,
    find: id => messages.find(message => message.id === id),
    forgottenCount: () => forgotten,
    clear: () => {
      messages = []
      forgotten = 0
      if (statePath !== undefined) save(statePath, messages)
    },
  }
}
