import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { findLinks } from '#fakes/mail/messages'
import { htmlPartPage } from '#fakes/mail/pages'
import type { MailStandIn } from '#fakes/mail/server'
import { startMail } from '#fakes/mail/server'
import { deliver, GOOD_HEADERS, writeMessage } from './smtp-talk'

const NOW_MS = Date.UTC(2026, 4, 19, 9, 15)

let mail: MailStandIn

beforeAll(async () => {
  mail = await startMail({ smtpPort: 0, inboxPort: 0, now: () => NOW_MS })
})
beforeEach(async () => {
  await fetch(`${mail.inboxUrl}/__fake__/reset`, { method: 'POST' })
})
afterAll(() => mail.close())

function get(path: string): Promise<Response> {
  return fetch(`${mail.inboxUrl}${path}`)
}

async function page(path: string): Promise<string> {
  const response = await get(path)
  expect(response.status).toBe(200)
  return response.text()
}

const ALTERNATIVE = [
  ...GOOD_HEADERS, 'X-Twice: one', 'X-Twice: two', 'MIME-Version: 1.0', 'Content-Type: multipart/alternative; boundary="edge"',
]
const BOTH_PARTS = [
  '--edge', 'Content-Type: text/plain; charset=utf-8', '',
  'Open https://app.test/confirm?token=abc, or <https://app.test/b>.', 'Again https://app.test/b', '',
  '--edge', 'Content-Type: text/html; charset=utf-8', '',
  '<!doctype html><html><head><title>t</title></head><body><p>Open <a href="https://app.test/confirm?token=abc">it</a><script>alert(1)</script></p></body></html>', '',
  '--edge--', '',
].join('\r\n')

describe('[house.fakes] what the mail stand-in keeps', () => {
  it('[house.fakes] answers each message with envelope, headers, both parts and links', async () => {
    await deliver(mail.smtpUrl, writeMessage(ALTERNATIVE, BOTH_PARTS), { to: 'Joel@Example.test' })
    const kept: unknown = await (await get('/__fake__/messages?to=joel@example.test')).json()
    expect(kept).toEqual([{
      id: expect.stringMatching(/^\d+$/),
      envelope: { from: 'letters@northfield.test', to: ['Joel@Example.test'] },
      from: { name: 'Northfield Studio', address: 'letters@northfield.test' },
      to: [{ name: 'Joel', address: 'joel@example.test' }],
      subject: 'Hello',
      messageId: '<one@northfield.test>',
      date: '2026-05-19T09:15:00.000Z',
      headers: {
        'date': 'Tue, 19 May 2026 09:15:00 +0000', 'from': 'Northfield Studio <letters@northfield.test>', 'to': 'Joel <joel@example.test>',
        'subject': 'Hello', 'message-id': '<one@northfield.test>', 'x-twice': 'one\ntwo', 'mime-version': '1.0',
        'content-type': 'multipart/alternative; boundary="edge"',
      },
      text: expect.stringContaining('Open https://app.test/confirm?token=abc, or'),
      html: expect.stringContaining('<script>alert(1)</script>'),
      links: ['https://app.test/confirm?token=abc', 'https://app.test/b'],
      receivedAtMs: NOW_MS,
    }])
    expect(await (await get('/__fake__/messages?to=ada@example.test')).json()).toEqual([])
    expect(await (await get('/__fake__/messages?to=joel')).json()).toEqual([])
  })

  it('[house.fakes] unstuffs dots and keeps a part that is missing as null', async () => {
    await deliver(mail.smtpUrl, writeMessage(GOOD_HEADERS, 'one\r\n..two\r\n'))
    expect(await (await get('/__fake__/messages')).json()).toMatchObject([{ text: 'one\n.two\n', html: null, links: [] }])
  })

  it('[house.fakes] keeps its state in a readable file and reads it again, half a last line aside', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'mail-'))
    const statePath = join(folder, 'deeper', 'mail.jsonl')
    try {
      const first = await startMail({ smtpPort: 0, inboxPort: 0, statePath })
      await deliver(first.smtpUrl, writeMessage())
      await first.close()
      expect(JSON.parse(readFileSync(statePath, 'utf8'))).toMatchObject({ subject: 'Hello', id: '1' })
      writeFileSync(statePath, '{"id":"2","env', { flag: 'a' })
      const second = await startMail({ smtpPort: 0, inboxPort: 0, statePath })
      await deliver(second.smtpUrl, writeMessage())
      expect(await (await fetch(`${second.inboxUrl}/__fake__/messages`)).json()).toMatchObject([{ id: '1' }, { id: '2' }])
      await fetch(`${second.inboxUrl}/__fake__/reset`, { method: 'POST' })
      await second.close()
      expect(readFileSync(statePath, 'utf8')).toBe('')
    }
    finally {
      rmSync(folder, { recursive: true })
    }
  })

  it('finds links without the punctuation around them', () => {
    expect(findLinks('(see http://a.test/x?y=1&z=2#w). https://b.test! "https://c.test" ftp://d.test')).toEqual([
      'http://a.test/x?y=1&z=2#w', 'https://b.test', 'https://c.test',
    ])
  })
})

describe('[house.fakes] the inbox pages', () => {
  it('[house.fakes] list letters newest first, escaped, filtered by recipient', async () => {
    const withSubject = (subject: string) => writeMessage(GOOD_HEADERS.map(header => header.startsWith('Subject:') ? `Subject: ${subject}` : header))
    await deliver(mail.smtpUrl, withSubject('<img src=x onerror=alert(1)>'), { to: 'ada@example.test' })
    await deliver(mail.smtpUrl, withSubject('Second'))
    const all = await page('/')
    expect(all).toContain('2 letters caught')
    expect(all).toContain('&lt;img src=x onerror=alert(1)&gt;')
    expect(all).not.toContain('<img')
    expect(all.indexOf('Second')).toBeLessThan(all.indexOf('&lt;img'))
    const filtered = await page('/?to=ADA')
    expect(filtered).toContain('1 letter caught')
    expect(filtered).not.toContain('Second')
    expect(await page('/?to=%22%3E%3Cscript%3E')).toContain('value="&quot;&gt;&lt;script&gt;"')
  })

  it('[house.fakes] list 200 at most and say so', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'mail-'))
    const statePath = join(folder, 'mail.jsonl')
    const one = { envelope: { from: 'a@b.test', to: ['c@d.test'] }, from: null, to: [], subject: 's', messageId: '<1@b.test>', date: '', headers: {}, text: null, html: null, links: [], receivedAtMs: NOW_MS }
    writeFileSync(statePath, Array.from({ length: 201 }, (_, index) => `${JSON.stringify({ id: String(index + 1), ...one })}\n`).join(''))
    const other = await startMail({ smtpPort: 0, inboxPort: 0, statePath })
    try {
      const text = await (await fetch(other.inboxUrl)).text()
      expect(text.match(/<li>/g)).toHaveLength(200)
      expect(text).toContain('The newest 200 of them.')
      expect(text).toContain('/messages/201"')
      expect(text).not.toContain('/messages/1"')
    }
    finally {
      await other.close()
      rmSync(folder, { recursive: true })
    }
  })

  it('[house.fakes] show a letter, its HTML part only in a frame without scripts', async () => {
    await deliver(mail.smtpUrl, writeMessage(ALTERNATIVE, BOTH_PARTS))
    const path = /\/messages\/\d+/.exec(await page('/'))?.[0] ?? ''
    const shown = await get(path)
    const text = await shown.text()
    expect(text).toContain('<dt>message-id</dt><dd>&lt;one@northfield.test&gt;</dd>')
    expect(text).toContain('href="https://app.test/confirm?token=abc"')
    expect(text).not.toContain('<script')
    expect(/<iframe[^>]*>/.exec(text)?.[0]).toContain('sandbox="allow-popups allow-popups-to-escape-sandbox"')
    expect(shown.headers.get('content-security-policy')).toContain('default-src \'none\'')

    const part = await get(`${path}/html`)
    const policy = part.headers.get('content-security-policy') ?? ''
    expect(policy).toContain('default-src \'none\'')
    expect(policy).toContain('sandbox allow-popups')
    expect(policy).not.toMatch(/allow-scripts|allow-same-origin|script-src/)
    expect(await part.text()).toContain('<head><base target="_blank">')
  })

  it('[house.fakes] say what to do while there is no letter, and 404 for one that is gone', async () => {
    expect(await page('/')).toContain('No letter yet.')
    expect((await get('/messages/99')).status).toBe(404)
  })

  it('open links of a part without a head in a new tab as well', () => {
    expect(htmlPartPage('<p>x</p>')).toBe('<base target="_blank"><p>x</p>')
  })

  it('[house.fakes] answer an unknown request loudly with what to add', async () => {
    const loud = vi.spyOn(process.stderr, 'write').mockReturnValue(true)
    try {
      for (const [method, path] of [['GET', '/inbox'], ['DELETE', '/__fake__/messages'], ['POST', '/']] as const) {
        const response = await fetch(`${mail.inboxUrl}${path}`, { method })
        expect(response.status).toBe(501)
        expect(await response.json()).toMatchObject({ message: expect.stringContaining(`does not answer ${method} ${path}`) })
      }
      expect(loud).toHaveBeenCalledTimes(3)
      expect(String(loud.mock.calls[0]?.[0])).toContain('fakes/mail/inbox-http.ts')
    }
    finally {
      loud.mockRestore()
    }
  })
})
