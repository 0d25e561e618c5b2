import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { MailRefusalName } from '#fakes/mail/refusals'
import { MAIL_REFUSALS } from '#fakes/mail/refusals'
import type { MailStandIn } from '#fakes/mail/server'
import { startMail } from '#fakes/mail/server'
import { deliver, GOOD_HEADERS, talkTo, writeMessage } from './smtp-talk'

let mail: MailStandIn

beforeAll(async () => {
  mail = await startMail({ smtpPort: 0, inboxPort: 0 })
})
beforeEach(async () => {
  await fetch(`${mail.inboxUrl}/__fake__/reset`, { method: 'POST' })
})
afterAll(() => mail.close())

async function countKept(): Promise<number> {
  const kept: unknown = await (await fetch(`${mail.inboxUrl}/__fake__/messages`)).json()
  return Array.isArray(kept) ? kept.length : -1
}

/** Says the lines one after the other and answers the last reply. */
async function say(...lines: string[]): Promise<string> {
  const talk = await talkTo(mail.smtpUrl)
  let reply = await talk.hear()
  for (const line of lines) reply = await talk.say(line)
  talk.end()
  return reply
}

function without(name: string): string[] {
  return GOOD_HEADERS.filter(header => !header.startsWith(`${name}:`))
}

function instead(name: string, ...lines: string[]): string[] {
  return [...without(name), ...lines]
}

const HELLO = 'EHLO client.test'
const SENDER = 'MAIL FROM:<letters@northfield.test>'
const TOO_MANY = Array.from({ length: 101 }, (_, index) => `RCPT TO:<reader${index}@example.test>`)
const LINE_OF_NINES = `${'9'.repeat(76)}\r\n`

/** Rows whose answer the SMTP library gives before our rules are asked. */
const ANSWERED_BY_LIBRARY = new Set<string>(['mail-before-hello', 'data-before-recipient', 'declared-too-large', 'recipient-not-an-address'])

/** One way to earn each refusal, and the same thing done right, which must pass. */
const cases: { [N in MailRefusalName]: { wrong: () => Promise<string>, right: () => Promise<string> } } = {
  'mail-before-hello': { wrong: () => say(SENDER), right: () => say(HELLO, SENDER) },
  'data-before-recipient': { wrong: () => say(HELLO, SENDER, 'DATA'), right: () => say(HELLO, SENDER, 'RCPT TO:<joel@example.test>') },
  'sender-not-an-address': { wrong: () => say(HELLO, 'MAIL FROM:<letters@localhost>'), right: () => say(HELLO, SENDER) },
  'smtputf8-not-offered': { wrong: () => say(HELLO, `${SENDER} SMTPUTF8`), right: () => say(HELLO, `${SENDER} BODY=8BITMIME`) },
  'declared-too-large': {
    wrong: () => say(HELLO, `${SENDER} SIZE=${25 * 1024 * 1024 + 1}`),
    right: () => say(HELLO, `${SENDER} SIZE=${25 * 1024 * 1024}`),
  },
  'recipient-not-an-address': {
    wrong: () => say(HELLO, SENDER, 'RCPT TO:<joel..okafor@example.test>'),
    right: () => say(HELLO, SENDER, 'RCPT TO:<joel.okafor+golf@example.test>'),
  },
  'too-many-recipients': { wrong: () => say(HELLO, SENDER, ...TOO_MANY), right: () => say(HELLO, SENDER, ...TOO_MANY.slice(0, 100)) },
  'too-large': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, LINE_OF_NINES.repeat(Math.ceil(25 * 1024 * 1024 / 78)))),
    right: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, LINE_OF_NINES.repeat(10_000))),
  },
  'nul-octet': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'a\u0000b\r\n')),
    right: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'a\u0001b\r\n')),
  },
  'bare-line-feed': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'one\ntwo\r\n')),
    right: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'one\r\ntwo\r\n')),
  },
  'bare-carriage-return': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'one\rtwo\r\n')),
    right: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'one\r\n\r\ntwo\r\n')),
  },
  'line-too-long': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, `${'x'.repeat(999)}\r\n`)),
    right: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, `${'x'.repeat(998)}\r\n`)),
  },
  'header-malformed': {
    wrong: () => deliver(mail.smtpUrl, writeMessage([...GOOD_HEADERS, 'no colon here'])),
    right: () => deliver(mail.smtpUrl, writeMessage([...GOOD_HEADERS, 'X-Note: one', '\tfolded'])),
  },
  'header-not-ascii': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(instead('Subject', 'Subject: Zo\u00EB'))),
    right: () => deliver(mail.smtpUrl, writeMessage(instead('Subject', 'Subject: =?utf-8?q?Zo=C3=AB?='))),
  },
  'header-twice': {
    wrong: () => deliver(mail.smtpUrl, writeMessage([...GOOD_HEADERS, 'SUBJECT: Again'])),
    right: () => deliver(mail.smtpUrl, writeMessage([...GOOD_HEADERS, 'Received: one', 'Received: two'])),
  },
  'date-missing': { wrong: () => deliver(mail.smtpUrl, writeMessage(without('Date'))), right: () => deliver(mail.smtpUrl, writeMessage()) },
  'date-unreadable': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(instead('Date', 'Date: yesterday'))),
    right: () => deliver(mail.smtpUrl, writeMessage(instead('Date', 'Date: Tue, 19 May 2026 09:15:00 GMT'))),
  },
  'from-missing': { wrong: () => deliver(mail.smtpUrl, writeMessage(without('From'))), right: () => deliver(mail.smtpUrl, writeMessage()) },
  'from-not-an-address': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(instead('From', 'From: Northfield Studio'))),
    right: () => deliver(mail.smtpUrl, writeMessage(instead('From', 'From: letters@northfield.test'))),
  },
  'message-id-missing': { wrong: () => deliver(mail.smtpUrl, writeMessage(without('Message-ID'))), right: () => deliver(mail.smtpUrl, writeMessage()) },
  'message-id-malformed': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(instead('Message-ID', 'Message-ID: one@northfield.test'))),
    right: () => deliver(mail.smtpUrl, writeMessage(instead('Message-ID', 'message-id: <two@northfield.test>'))),
  },
  'body-eight-bit-undeclared': {
    wrong: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'Zo\u00EB\r\n')),
    right: () => deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'Zo\u00EB\r\n'), { mailArguments: ' BODY=8BITMIME' }),
  },
}

describe('[house.fakes] the mail stand-in refuses what a careful server refuses', () => {
  it('[house.fakes] has a test for each row of its table of refusals, and no test without a row', () => {
    expect(Object.keys(cases).sort()).toEqual(Object.keys(MAIL_REFUSALS).sort())
  })

  it.each(Object.entries(MAIL_REFUSALS))('[house.fakes] %s', async (name, refusal) => {
    const found = Object.entries(cases).find(([key]) => key === name)?.[1]
    if (!found) throw new Error(`no case for ${name}`)
    const reply = await found.wrong()
    expect(reply).toMatch(new RegExp(`^${refusal.code} `))
    // Our own words, so that the wrong rule cannot pass for the right one.
    if (!ANSWERED_BY_LIBRARY.has(name)) expect(reply).toContain(refusal.words)
    expect(await countKept()).toBe(0)
    expect(await found.right()).toMatch(/^250 /)
  }, 20_000)

  it('[house.fakes] refuses what is no recipient', async () => {
    const talk = await talkTo(mail.smtpUrl)
    await talk.hear()
    for (const line of [HELLO, SENDER]) await talk.say(line)
    for (const address of [
      '', 'joel', '@example.test', 'joel@', 'joel@example', '.joel@example.test', 'joel.@example.test', 'jo el@example.test', 'joel@exa_mple.test',
      'joel@-example.test', 'joel@example..test', `${'x'.repeat(65)}@example.test`, `joel@${'x'.repeat(64)}.test`, 'jo"el@example.test', 'zo\u00EB@example.test',
      'a@b.test,c@d.test',
    ]) {
      expect(await talk.say(`RCPT TO:<${address}>`), address).toMatch(/^501 /)
    }
    for (const address of ['joel@example.test', 'j@e.co', 'joel.okafor+golf@mail.example.test', 'o\'neil@example.test', 'joel@xn--exmple-cua.test']) {
      expect(await talk.say(`RCPT TO:<${address}>`), address).toMatch(/^250 /)
    }
    talk.end()
  })

  it('[house.fakes] lists what it refused', async () => {
    await deliver(mail.smtpUrl, writeMessage(without('Date')))
    expect(await (await fetch(`${mail.inboxUrl}/__fake__/state`)).json()).toMatchObject({
      smtpUrl: mail.smtpUrl, messages: 0, refused: [{ name: 'date-missing', code: 550 }],
    })
  })
})
