import type { Server } from 'node:net'
import { createServer } from 'node:net'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { z } from 'zod'
import type { Fault } from '#fakes/mail/faults'
import type { MailStandIn } from '#fakes/mail/server'
import { startMail } from '#fakes/mail/server'
import type { Mailer, OutgoingMail } from '#server/adapters/mail'
import { createMailer } from '#server/adapters/mail'
import { listLetterNames, writeLetter } from '#server/features/mail/letters/index'
import { letterSamples } from './letter-samples'

const kept = z.array(z.object({
  envelope: z.object({ from: z.string(), to: z.array(z.string()) }),
  from: z.object({ name: z.string(), address: z.string() }),
  to: z.array(z.object({ name: z.string(), address: z.string() })),
  subject: z.string(),
  messageId: z.string(),
  date: z.string(),
  headers: z.record(z.string(), z.string()),
  text: z.string(),
  html: z.string(),
  links: z.array(z.string()),
}))

let mail: MailStandIn
let mailer: Mailer

beforeAll(async () => {
  mail = await startMail({ smtpPort: 0, inboxPort: 0 })
})
beforeEach(async () => {
  await fetch(`${mail.inboxUrl}/__fake__/reset`, { method: 'POST' })
  mailer = createMailer({ smtpUrl: mail.smtpUrl, from: 'Northfield Studio <letters@northfield.test>' })
})
afterEach(() => mailer.close())
afterAll(() => mail.close())

function letterTo(change: Partial<OutgoingMail> = {}): OutgoingMail {
  return {
    messageId: '0196f0a2-7c11@northfield.test',
    to: { name: 'Joel Okafor', address: 'joel@example.test' },
    subject: 'Mara has answered',
    text: 'Plain words.\n',
    html: '<p>Plain words.</p>\n',
    date: new Date(Date.UTC(2026, 4, 19, 9, 15)),
    ...change,
  }
}

async function listKept() {
  return kept.parse(await (await fetch(`${mail.inboxUrl}/__fake__/messages`)).json())
}

async function getOnly() {
  const messages = await listKept()
  expect(messages).toHaveLength(1)
  const [only] = messages
  if (!only) throw new Error('nothing was kept')
  return only
}

async function fail(fault: Fault): Promise<void> {
  const response = await fetch(`${mail.inboxUrl}/__fake__/fail`, { method: 'POST', body: JSON.stringify(fault) })
  expect(response.status).toBe(200)
}

async function listen(server: Server): Promise<number> {
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const address = server.address()
  return address !== null && typeof address === 'object' ? address.port : 0
}

describe('letters sent through the adapter', () => {
  it.each(listLetterNames())('[house.fakes] %s arrives word for word', async (name) => {
    const { subject, text, html } = writeLetter(name, letterSamples[name])
    expect(await mailer.send(letterTo({ subject, text, html }))).toEqual({ kind: 'sent' })
    const arrived = await getOnly()
    expect(arrived.subject).toBe(subject)
    expect(arrived.text).toBe(text)
    expect(arrived.html).toBe(html)
    expect(arrived.links).toEqual(text.match(/https?:\/\/\S+/g))
  })

  it('[house.fakes] carries sender, reader, Message-ID, date and further headers', async () => {
    const headers = { 'List-Unsubscribe': `<https://lessons.northfield.test/unsubscribe/${'x'.repeat(80)}>`, 'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click' }
    expect(await mailer.send(letterTo({ headers }))).toEqual({ kind: 'sent' })
    expect(await getOnly()).toMatchObject({
      envelope: { from: 'letters@northfield.test', to: ['joel@example.test'] },
      from: { name: 'Northfield Studio', address: 'letters@northfield.test' },
      to: [{ name: 'Joel Okafor', address: 'joel@example.test' }],
      messageId: '<0196f0a2-7c11@northfield.test>',
      date: '2026-05-19T09:15:00.000Z',
      headers: { 'auto-submitted': 'auto-generated', 'list-unsubscribe': headers['List-Unsubscribe'], 'list-unsubscribe-post': 'List-Unsubscribe=One-Click' },
    })
  })

  it('[house.fakes] carries every script, and lines of a thousand letters', async () => {
    const words = `Zoë, 李雷 und Łukasz 🏌️ — ${'långt '.repeat(400)}\n.\n..\nFrom here\n`
    expect(await mailer.send(letterTo({ subject: 'Zoë 李雷 🏌️ has answered', to: { name: 'Zoë "Z" 李', address: 'zoe@example.test' }, text: words, html: `<p>${words}</p>` }))).toEqual({ kind: 'sent' })
    const arrived = await getOnly()
    expect(arrived).toMatchObject({ subject: 'Zoë 李雷 🏌️ has answered', to: [{ name: 'Zoë "Z" 李', address: 'zoe@example.test' }], text: words })
    expect(arrived.html).toBe(`<p>${words}</p>`)
  })

  it('takes the Message-ID with or without its brackets', async () => {
    await mailer.send(letterTo({ messageId: '<a@b.test>' }))
    expect((await getOnly()).messageId).toBe('<a@b.test>')
  })

  it('sends many at once', async () => {
    const results = await Promise.all(Array.from({ length: 40 }, (_, index) => mailer.send(letterTo({ messageId: `${index}@b.test` }))))
    expect(results).toEqual(results.map(() => ({ kind: 'sent' })))
    expect(new Set((await listKept()).map(message => message.messageId)).size).toBe(40)
  })
})

describe('hostile words in headers', () => {
  const INJECTION = 'Joel\r\nBcc: spy@example.test\r\n\r\nbody\u0000\u2028X-Evil: 1'

  it.each([
    ['a name', { to: { name: INJECTION, address: 'joel@example.test' } }],
    ['a subject', { subject: INJECTION }],
    ['a header', { headers: { 'X-Note': INJECTION } }],
    ['a name like an address', { to: { name: 'spy@example.test>, <spy2@example.test', address: 'joel@example.test' } }],
    ['a name with a quote', { to: { name: '"," <spy@example.test>', address: 'joel@example.test' } }],
  ])('adds no header and no reader by %s', async (_, change) => {
    expect(await mailer.send(letterTo(change))).toEqual({ kind: 'sent' })
    const arrived = await getOnly()
    expect(arrived.envelope.to).toEqual(['joel@example.test'])
    expect(arrived.to.map(reader => reader.address)).toEqual(['joel@example.test'])
    expect(arrived.headers).not.toHaveProperty('bcc')
    expect(arrived.headers).not.toHaveProperty('x-evil')
    expect(arrived.text).toBe('Plain words.\n')
  })

  it.each([
    '', 'joel', 'joel@example.test\r\nRCPT TO:<spy@example.test>', 'joel@example.test, spy@example.test', 'a b@example.test', '<joel@example.test>',
    'joel@example.test\u0000', `${'x'.repeat(250)}@example.test`, 'zoë@example.test', '"Joel" <joel@example.test>',
  ])('does not send to %j', async (address) => {
    expect(await mailer.send(letterTo({ to: { name: '', address } }))).toEqual({ kind: 'refused-for-good', reason: 'the reader\'s address is no address' })
    expect(await listKept()).toEqual([])
  })

  it.each(['Bcc', 'to', 'FROM', 'Message-ID', 'Content-Type', 'MIME-Version', 'Resent-To', 'X-A\r\nBcc', 'X:Y', ''])('does not let %j be set as a further header', async (name) => {
    expect(await mailer.send(letterTo({ headers: { [name]: 'x' } }))).toMatchObject({ kind: 'refused-for-good' })
    expect(await listKept()).toEqual([])
  })

  it('does not send with a Message-ID or a date that is none', async () => {
    for (const change of [{ messageId: 'none' }, { messageId: 'a@b.test>\r\nBcc: x@y.test' }, { messageId: 'a b@c.test' }, { date: new Date(Number.NaN) }]) {
      expect(await mailer.send(letterTo(change))).toMatchObject({ kind: 'refused-for-good' })
    }
    expect(await listKept()).toEqual([])
  })
})

describe('refusals and faults', () => {
  it.each([
    ['mail', 451, 'refused-for-now'], ['mail', 550, 'refused-for-good'],
    ['rcpt', 450, 'refused-for-now'], ['rcpt', 550, 'refused-for-good'],
    ['data', 452, 'refused-for-now'], ['data', 554, 'refused-for-good'],
    ['rcpt', 421, 'refused-for-now'], ['data', 503, 'refused-for-now'],
    // Speaks of us, not of the letter.
    ['connect', 421, 'refused-for-now'], ['connect', 554, 'refused-for-now'],
  ] as const)('[house.fakes] at %s with %i is %s, and the next attempt arrives once', async (at, status, kind) => {
    await fail({ match: '.*', times: 1, status, at })
    expect(await mailer.send(letterTo())).toMatchObject({ kind, reason: expect.stringMatching(/\S/) })
    expect(await listKept()).toEqual([])
    expect(await mailer.send(letterTo())).toEqual({ kind: 'sent' })
    expect(await listKept()).toHaveLength(1)
  })

  it.each(['connect', 'mail', 'rcpt', 'data', 'before-dot'] as const)('[house.fakes] a cut at %s is for now and leaves nothing behind', async (at) => {
    await fail({ match: '.*', times: 1, status: 'reset', at })
    expect(await mailer.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
    expect(await listKept()).toEqual([])
    expect(await mailer.send(letterTo())).toEqual({ kind: 'sent' })
  })

  it('[house.fakes] a cut after the final dot is for now, and the double has the same Message-ID', async () => {
    await fail({ match: '.*', times: 1, status: 'reset', at: 'after-dot' })
    expect(await mailer.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
    expect(await mailer.send(letterTo())).toEqual({ kind: 'sent' })
    expect((await listKept()).map(message => message.messageId)).toEqual(['<0196f0a2-7c11@northfield.test>', '<0196f0a2-7c11@northfield.test>'])
  })

  it.each(['connect', 'mail', 'rcpt', 'data', 'before-dot'] as const)('[house.fakes] silence at %s is for now within the time-out', async (at) => {
    const impatient = createMailer({ smtpUrl: mail.smtpUrl, from: 'letters@northfield.test', stepTimeoutMs: 700 })
    await fail({ match: '.*', times: 1, status: 'hang', at })
    const startedAtMs = performance.now()
    expect(await impatient.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
    expect(performance.now() - startedAtMs).toBeLessThan(5000)
    impatient.close()
    expect(await listKept()).toEqual([])
  })

  it('is for now when nobody listens, and when what listens is no mail server', async () => {
    const nobody = createMailer({ smtpUrl: 'smtp://127.0.0.1:1', from: 'letters@northfield.test', stepTimeoutMs: 500 })
    expect(await nobody.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
    nobody.close()
    const web = createMailer({ smtpUrl: mail.inboxUrl.replace('http', 'smtp'), from: 'letters@northfield.test', stepTimeoutMs: 500 })
    expect(await web.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
    web.close()
  })

  it('makes one attempt only, even at a server that hangs up at once', async () => {
    let connections = 0
    const server = createServer((socket) => {
      connections += 1
      socket.end()
    })
    const port = await listen(server)
    const other = createMailer({ smtpUrl: `smtp://127.0.0.1:${port}`, from: 'letters@northfield.test' })
    expect(await other.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
    expect(connections).toBe(1)
    other.close()
    server.close()
  })

  it('gives up on a server that trickles its greeting for ever', async () => {
    const server = createServer((socket) => {
      const timer = setInterval(() => socket.write('220-still here\r\n'), 50)
      socket.on('error', () => {}).on('close', () => clearInterval(timer))
    })
    const port = await listen(server)
    const slow = createMailer({ smtpUrl: `smtp://127.0.0.1:${port}`, from: 'letters@northfield.test', stepTimeoutMs: 200 })
    expect(await slow.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
    slow.close()
    server.close()
  })

  it('does not repeat the reader\'s address in the reason', async () => {
    const answers = ['220 ready', '250 hello', '250 ok', '550 <joel@example.test>: no such person joel@example.test here']
    const server = createServer((socket) => {
      let next = 0
      const answer = () => socket.write(`${answers[next++] ?? '250 ok'}\r\n`)
      socket.on('error', () => {}).on('data', answer)
      answer()
    })
    const port = await listen(server)
    const other = createMailer({ smtpUrl: `smtp://127.0.0.1:${port}`, from: 'letters@northfield.test', stepTimeoutMs: 500 })
    expect(await other.send(letterTo())).toEqual({ kind: 'refused-for-good', reason: '550 [address]: no such person [address] here' })
    other.close()
    server.close()
  })

  it('answers for now after it was closed', async () => {
    mailer.close()
    expect(await mailer.send(letterTo())).toMatchObject({ kind: 'refused-for-now' })
  })
})

describe('settings', () => {
  it('takes a sender with and without a name', () => {
    for (const from of ['letters@northfield.test', '<letters@northfield.test>', 'Northfield <letters@northfield.test>', '"North, field" <letters@northfield.test>']) {
      expect(() => createMailer({ smtpUrl: 'smtp://127.0.0.1:1', from }).close(), from).not.toThrow()
    }
  })

  it('stops at settings that cannot be right', () => {
    for (const from of ['', 'Northfield', 'Northfield <>', 'a@b.test, c@d.test', 'a@b.test\r\nBcc: c@d.test']) {
      expect(() => createMailer({ smtpUrl: 'smtp://127.0.0.1:1', from }), from).toThrow(TypeError)
    }
    for (const smtpUrl of ['', '127.0.0.1:25', 'http://127.0.0.1:25']) {
      expect(() => createMailer({ smtpUrl, from: 'a@b.test' }), smtpUrl).toThrow(TypeError)
    }
  })
})
