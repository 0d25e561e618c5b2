import type { ChildProcess } from 'node:child_process'
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { startPayments } from '#fakes/payments/server'
import { anything, ask, openSession, order, paidSession, readState, SECRET_KEY, SESSION, startReceiver, startStandIn, WEBHOOK_SECRET, EVENTUALLY } from './support'

function newFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'turfnote-payments-'))
  onTestFinished(() => rmSync(folder, { recursive: true }))
  return folder
}

async function freePort(): Promise<number> {
  const server = createServer().listen(0, '127.0.0.1')
  await once(server, 'listening')
  const address = server.address()
  server.close()
  await once(server, 'close')
  if (address === null || typeof address === 'string') throw new Error('no port')
  return address.port
}

describe('the state file', () => {
  it('[house.fakes] is readable JSON, and sessions, keys and undelivered events outlive the process', async () => {
    const statePath = join(newFolder(), 'deep', 'payments.json')
    const first = await startPayments({ port: 0, statePath, secretKey: SECRET_KEY, webhookSecret: WEBHOOK_SECRET })
    const headers = { 'Idempotency-Key': 'kept' }
    const opened = await ask(first, '/v1/checkout/sessions', { form: SESSION, headers })
    const { id } = await paidSession(first)
    // Read before closing: what was answered must be in the file by then.
    const kept = readFileSync(statePath, 'utf8')
    expect(kept.split('\n').length).toBeGreaterThan(50)
    expect(JSON.parse(kept)).toMatchObject({ sessions: { [id]: { status: 'complete' } } })
    expect(kept).not.toContain(SECRET_KEY)
    await first.close()

    const receiver = await startReceiver()
    const second = await startStandIn({ statePath, webhookUrl: receiver.url })
    await expect.poll(() => receiver.received.map(event => event.type).sort(), EVENTUALLY).toEqual(['checkout.session.completed', 'payment_intent.succeeded'])
    const replayed = await ask(second, '/v1/checkout/sessions', { form: SESSION, headers })
    expect([replayed.headers.get('idempotent-replayed'), replayed.body.id]).toEqual(['true', opened.body.id])
    await order(second, 'reset', {}, anything)
    expect(JSON.parse(readFileSync(statePath, 'utf8'))).toMatchObject({ sessions: {}, events: [] })
  })

  it('answers on 127.0.0.1 and takes a free port', async () => {
    const running = await startStandIn()
    expect(running.url).toBe(`http://127.0.0.1:${running.port}`)
    expect((await openSession(running)).url).toMatch(new RegExp(`^${running.url}/pay/cs_test_`))
    expect((await readState(running)).requests).toHaveLength(1)
  })
})

describe('the process', () => {
  function start(env: Record<string, string>): { child: ChildProcess, output: () => string } {
    const child = spawn(process.execPath, ['node_modules/jiti/lib/jiti-cli.mjs', 'fakes/payments/main.ts'], {
      env: { PATH: process.env['PATH'] ?? '', ...env }, stdio: ['ignore', 'pipe', 'pipe'],
    })
    onTestFinished(() => void child.kill('SIGKILL'))
    let output = ''
    child.stdout.on('data', (chunk: Buffer) => output += chunk.toString())
    child.stderr.on('data', (chunk: Buffer) => output += chunk.toString())
    return { child, output: () => output }
  }

  it.each(['SIGTERM', 'SIGINT'] as const)('[house.fakes] prints one line when listening and ends cleanly on %s', async (signal) => {
    const port = await freePort()
    const { child, output } = start({
      STRIPE_SECRET_KEY: SECRET_KEY, STRIPE_WEBHOOK_SECRET: WEBHOOK_SECRET, STRIPE_API_BASE: `http://127.0.0.1:${port}`,
      APP_URL: 'http://127.0.0.1:3000/', FAKE_PAYMENTS_STATE: join(newFolder(), 'payments.json'),
    })
    await expect.poll(output, { timeout: 15_000 }).toBe(`payments stand-in on http://127.0.0.1:${port}, events to http://127.0.0.1:3000/webhooks/stripe\n`)
    expect((await fetch(`http://127.0.0.1:${port}/__fake__/state`)).status).toBe(200)
    child.kill(signal)
    expect(await once(child, 'exit')).toEqual([0, null])
  }, 20_000)

  it('says what is missing and ends with 1', async () => {
    const { child, output } = start({ STRIPE_SECRET_KEY: SECRET_KEY })
    expect(await once(child, 'exit')).toEqual([1, null])
    expect(output()).toContain('STRIPE_WEBHOOK_SECRET')
  }, 20_000)
})
