import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Fault } from '#fakes/mail/faults'
import { createFaultBook } from '#fakes/mail/faults'
import type { MailStandIn } from '#fakes/mail/server'
import { startMail } from '#fakes/mail/server'
import { deliver, talkTo, writeMessage } from './smtp-talk'

let mail: MailStandIn

beforeAll(async () => {
  mail = await startMail({ smtpPort: 0, inboxPort: 0 })
})
beforeEach(async () => {
  await fetch(`${mail.inboxUrl}/__fake__/reset`, { method: 'POST' })
})
afterAll(() => mail.close())

function askFor(fault: unknown): Promise<Response> {
  return fetch(`${mail.inboxUrl}/__fake__/fail`, {
    method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(fault),
  })
}

async function fail(fault: Fault): Promise<void> {
  expect((await askFor(fault)).status).toBe(200)
}

async function countKept(): Promise<number> {
  const kept: unknown = await (await fetch(`${mail.inboxUrl}/__fake__/messages`)).json()
  return Array.isArray(kept) ? kept.length : -1
}

function outcomeWithin(reply: Promise<string>, ms: number): Promise<string> {
  return Promise.race([reply, new Promise<string>(resolve => setTimeout(resolve, ms, 'silence'))])
}

async function sayAll(lines: readonly string[]): Promise<string[]> {
  const talk = await talkTo(mail.smtpUrl)
  const replies = [await talk.hear()]
  for (const line of lines) replies.push(await talk.say(line))
  talk.end()
  return replies.map(reply => reply.slice(0, 3))
}

describe('[house.fakes] the mail stand-in told to fail', () => {
  it('[house.fakes] refuses a connection, the given number of times', async () => {
    await fail({ match: '.*', times: 2, status: 421, at: 'connect' })
    expect(await sayAll([])).toEqual(['421'])
    expect(await sayAll([])).toEqual(['421'])
    expect(await sayAll([])).toEqual(['220'])
  })

  it('[house.fakes] refuses a sender and a recipient that match, and no other', async () => {
    await fail({ match: 'letters@', times: 1, status: 451, at: 'mail' })
    await fail({ match: '^joel@', times: 1, status: 550, at: 'rcpt' })
    expect(await sayAll([
      'EHLO client.test', 'MAIL FROM:<letters@northfield.test>', 'MAIL FROM:<letters@northfield.test>',
      'RCPT TO:<ada@example.test>', 'RCPT TO:<joel@example.test>', 'RCPT TO:<joel@example.test>',
    ])).toEqual(['220', '250', '451', '250', '250', '550', '250'])
  })

  it('[house.fakes] refuses a message by recipient or by subject and keeps nothing of it', async () => {
    await fail({ match: 'hello', times: 1, status: 452, at: 'data' })
    expect(await deliver(mail.smtpUrl, writeMessage())).toMatch(/^452 told to fail at data/)
    await fail({ match: 'joel@example', times: 1, status: 554, at: 'data' })
    expect(await deliver(mail.smtpUrl, writeMessage())).toMatch(/^554 /)
    expect(await countKept()).toBe(0)
    expect(await deliver(mail.smtpUrl, writeMessage())).toMatch(/^250 /)
    expect(await countKept()).toBe(1)
  })

  it('[house.fakes] matches a subject that travels encoded', async () => {
    const message = writeMessage(['Date: Tue, 19 May 2026 09:15:00 +0000', 'From: letters@northfield.test', 'Subject: =?utf-8?q?Zo=C3=AB_asks?=', 'Message-ID: <one@northfield.test>'])
    await fail({ match: 'Zoë', times: 1, status: 450, at: 'data' })
    expect(await deliver(mail.smtpUrl, message)).toMatch(/^450 /)
  })

  it('[house.fakes] cuts the connection before the final dot and keeps nothing', async () => {
    await fail({ match: '.*', times: 1, status: 'reset', at: 'before-dot' })
    expect(await deliver(mail.smtpUrl, writeMessage())).toBe('')
    expect(await countKept()).toBe(0)
  })

  it('[house.fakes] cuts the connection in the middle of a long message', async () => {
    await fail({ match: '.*', times: 1, status: 'reset', at: 'before-dot' })
    const talk = await talkTo(mail.smtpUrl)
    await talk.hear()
    for (const line of ['EHLO client.test', 'MAIL FROM:<letters@northfield.test>', 'RCPT TO:<joel@example.test>', 'DATA']) await talk.say(line)
    talk.write(writeMessage())
    expect(await talk.hear()).toBe('')
    expect(await countKept()).toBe(0)
  })

  it('[house.fakes] cuts the connection after the final dot with the message kept', async () => {
    await fail({ match: '.*', times: 1, status: 'reset', at: 'after-dot' })
    expect(await deliver(mail.smtpUrl, writeMessage())).toBe('')
    expect(await countKept()).toBe(1)
  })

  it('[house.fakes] keeps the message and still answers an error when told to at after-dot', async () => {
    await fail({ match: '.*', times: 1, status: 451, at: 'after-dot' })
    expect(await deliver(mail.smtpUrl, writeMessage())).toMatch(/^451 /)
    expect(await countKept()).toBe(1)
  })

  it.each(['connect', 'mail', 'rcpt', 'data', 'before-dot', 'after-dot'] as const)('[house.fakes] says nothing at %s when told to hang', async (at) => {
    await fail({ match: '.*', times: 1, status: 'hang', at })
    expect(await outcomeWithin(deliver(mail.smtpUrl, writeMessage()), 500)).toBe('silence')
    expect(await countKept()).toBe(at === 'after-dot' ? 1 : 0)
    expect(await deliver(mail.smtpUrl, writeMessage())).toMatch(/^250 /)
  })

  it.each(['connect', 'mail', 'rcpt', 'data'] as const)('[house.fakes] cuts the connection at %s', async (at) => {
    await fail({ match: '.*', times: 1, status: 'reset', at })
    expect(await deliver(mail.smtpUrl, writeMessage())).toBe('')
    expect(await countKept()).toBe(0)
  })

  it('[house.fakes] gives the true answer late when told to be slow', async () => {
    await fail({ match: '.*', times: 1, status: 'slow', at: 'data', delayMs: 400 })
    const startedAtMs = performance.now()
    expect(await deliver(mail.smtpUrl, writeMessage())).toMatch(/^250 /)
    expect(performance.now() - startedAtMs).toBeGreaterThanOrEqual(395)
  })

  it('[house.fakes] shows what is left to fail, and reset forgets it', async () => {
    await fail({ match: 'joel', times: 3, status: 450, at: 'rcpt' })
    await deliver(mail.smtpUrl, writeMessage())
    const state = async () => (await fetch(`${mail.inboxUrl}/__fake__/state`)).json()
    expect(await state()).toMatchObject({ faults: [{ match: 'joel', times: 2, status: 450, at: 'rcpt' }] })
    await fetch(`${mail.inboxUrl}/__fake__/reset`, { method: 'POST' })
    expect(await state()).toMatchObject({ faults: [], refused: [], messages: 0 })
  })

  it.each([
    [{}, 422], [{ match: '(', times: 1, status: 450, at: 'rcpt' }, 422], [{ match: '.*', times: 0, status: 450, at: 'rcpt' }, 422],
    [{ match: '.*', times: 1, status: 250, at: 'rcpt' }, 422], [{ match: '.*', times: 1, status: 'explode', at: 'rcpt' }, 422],
    [{ match: '.*', times: 1, status: 450, at: 'lunch' }, 422], [{ match: '.*', times: 1, status: 450, at: 'before-dot' }, 422],
    [{ match: 'joel', times: 1, status: 450, at: 'connect' }, 422], [{ match: '.*', times: 1, status: 'slow', at: 'data' }, 422],
    [{ match: '.*', times: 1, status: 450, at: 'rcpt', extra: 1 }, 422],
  ])('[house.fakes] refuses to fail by %j', async (fault, status) => {
    const response = await askFor(fault)
    expect(response.status).toBe(status)
    expect(await response.json()).toHaveProperty('message')
  })

  it('[house.fakes] answers 400 to a body that is not JSON', async () => {
    expect((await fetch(`${mail.inboxUrl}/__fake__/fail`, { method: 'POST', body: '{' })).status).toBe(400)
  })
})

describe('the book of faults', () => {
  it('takes the first that fits, and each only as often as asked', () => {
    const book = createFaultBook()
    book.add({ match: 'a', times: 1, status: 450, at: 'rcpt' })
    book.add({ match: '.', times: 2, status: 550, at: 'rcpt' })
    expect(book.take('mail', ['a'])).toBeUndefined()
    expect([book.take('rcpt', ['A']), book.take('rcpt', ['a']), book.take('rcpt', ['b']), book.take('rcpt', ['b'])].map(fault => fault?.status))
      .toEqual([450, 550, 550, undefined])
    expect(book.list()).toEqual([])
  })
})
