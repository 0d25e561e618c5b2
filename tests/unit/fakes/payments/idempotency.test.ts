import { describe, expect, it } from 'vitest'
import { anything, ask, order, paidSession, readState, SESSION, startStandIn } from './support'

const keyed = (key: string) => ({ 'Idempotency-Key': key })

describe('idempotency keys', () => {
  it('[house.fakes] the same key and parameters get the same answer, marked as replayed', async () => {
    const running = await startStandIn()
    const first = await ask(running, '/v1/checkout/sessions', { form: SESSION, headers: keyed('one') })
    const reordered = Object.fromEntries(Object.entries(SESSION).reverse())
    const second = await ask(running, '/v1/checkout/sessions', { form: reordered, headers: keyed('one') })
    expect(second.body).toEqual(first.body)
    expect(first.headers.get('idempotent-replayed')).toBeNull()
    expect(second.headers.get('idempotent-replayed')).toBe('true')
    expect(second.headers.get('original-request')).toBe(first.headers.get('request-id'))
    expect(second.headers.get('request-id')).not.toBe(first.headers.get('request-id'))
    expect(Object.keys((await readState(running)).sessions)).toHaveLength(1)
  })

  it('another key opens another session', async () => {
    const running = await startStandIn()
    const first = await ask(running, '/v1/checkout/sessions', { form: SESSION, headers: keyed('one') })
    const second = await ask(running, '/v1/checkout/sessions', { form: SESSION, headers: keyed('two') })
    expect(second.body.id).not.toBe(first.body.id)
  })

  it('keeps a refusal that came of acting, and forgets one that came of the parameters', async () => {
    const running = await startStandIn()
    const { paymentIntentId } = await paidSession(running)
    const tooMuch = { payment_intent: paymentIntentId, amount: '9999' }
    await ask(running, '/v1/refunds', { form: tooMuch, headers: keyed('much') })
    const again = await ask(running, '/v1/refunds', { form: tooMuch, headers: keyed('much') })
    expect([again.status, again.headers.get('idempotent-replayed')]).toEqual([400, 'true'])

    await ask(running, '/v1/refunds', { form: { payment_intent: paymentIntentId, amount: 'all' }, headers: keyed('typo') })
    const corrected = await ask(running, '/v1/refunds', { form: { payment_intent: paymentIntentId, amount: '100' }, headers: keyed('typo') })
    expect([corrected.status, corrected.headers.get('idempotent-replayed')]).toEqual([200, null])
  })

  it('forgets a key after a day', async () => {
    const running = await startStandIn()
    const first = await ask(running, '/v1/checkout/sessions', { form: SESSION, headers: keyed('one') })
    await order(running, 'clock', { offsetMs: 24 * 3600 * 1000 }, anything)
    const later = await ask(running, '/v1/checkout/sessions', { form: SESSION, headers: keyed('one') })
    expect(later.status).toBe(200)
    expect(later.body.id).not.toBe(first.body.id)
  })

  it('frees a key when the client of a hanging request goes away', async () => {
    const running = await startStandIn()
    await order(running, 'fail', { match: 'POST /v1/checkout/sessions', hang: true }, anything)
    await expect(fetch(`${running.url}/v1/checkout/sessions`, {
      method: 'POST',
      body: new URLSearchParams(SESSION),
      headers: { Authorization: 'Bearer sk_test_stand_in', ...keyed('one') },
      signal: AbortSignal.timeout(200),
    })).rejects.toThrow()
    await new Promise(resolve => setTimeout(resolve, 50))
    const next = await ask(running, '/v1/checkout/sessions', { form: SESSION, headers: keyed('one') })
    expect(next.status).toBe(200)
    expect(Object.keys((await readState(running)).sessions)).toHaveLength(1)
  })

  it('answers the version asked for, and a request id', async () => {
    const running = await startStandIn()
    const answer = await ask(running, '/v1/events', { headers: { 'Stripe-Version': '2026-09-30.endive' } })
    expect(answer.headers.get('stripe-version')).toBe('2026-09-30.endive')
    expect(answer.headers.get('request-id')).toMatch(/^req_\w{24}$/)
  })
})
