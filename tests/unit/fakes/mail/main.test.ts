import type { ChildProcess } from 'node:child_process'
import { spawn } from 'node:child_process'
import { createRequire } from 'node:module'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

const jiti = join(dirname(createRequire(import.meta.url).resolve('jiti/package.json')), 'lib/jiti-cli.mjs')
const entry = fileURLToPath(new URL('../../../../fakes/mail/main.ts', import.meta.url))

function start(environment: Record<string, string>): ChildProcess {
  return spawn(process.execPath, [jiti, entry], { env: { PATH: process.env.PATH ?? '', ...environment }, stdio: ['ignore', 'pipe', 'pipe'] })
}

async function finish(child: ChildProcess): Promise<{ code: number | null, out: string, err: string }> {
  let out = ''
  let err = ''
  child.stdout?.on('data', (text) => {
    out += String(text)
  })
  child.stderr?.on('data', (text) => {
    err += String(text)
  })
  const code = await new Promise<number | null>(resolve => child.once('close', resolve))
  return { code, out, err }
}

describe('[house.fakes] the mail stand-in as a process', () => {
  it.each(['SIGTERM', 'SIGINT'] as const)('[house.fakes] says one line, answers, and stops cleanly on %s', async (signal) => {
    const child = start({ SMTP_URL: 'smtp://127.0.0.1:0', FAKE_MAIL_INBOX_PORT: '0' })
    const line = await new Promise<string>((resolve) => {
      child.stdout?.once('data', text => resolve(String(text)))
      child.once('close', () => resolve(''))
    })
    const finished = finish(child)
    expect(line).toMatch(/^mail stand-in: smtp:\/\/127\.0\.0\.1:\d+, inbox http:\/\/127\.0\.0\.1:\d+\n$/)
    const inboxUrl = /http:\S+/.exec(line)?.[0] ?? ''
    expect((await fetch(`${inboxUrl}/__fake__/state`)).status).toBe(200)
    child.kill(signal)
    expect(await finished).toEqual({ code: 0, out: '', err: '' })
  }, 20_000)

  it.each([
    [{}, 'SMTP_URL must be set'],
    [{ SMTP_URL: 'smtp://mail.example.test:25', FAKE_MAIL_INBOX_PORT: '0' }, '127.0.0.1 only'],
    [{ SMTP_URL: 'smtp://127.0.0.1:0' }, 'FAKE_MAIL_INBOX_PORT must name a port'],
  ])('[house.fakes] stops with words when told %j', async (environment, words) => {
    const { code, out, err } = await finish(start(environment))
    expect({ code, out }).toEqual({ code: 1, out: '' })
    expect(err).toContain(words)
  }, 20_000)
})
