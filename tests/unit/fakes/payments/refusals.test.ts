import { describe, expect, it } from 'vitest'
import type { Refusal, RefusalName } from '#fakes/payments/refusals'
import { REFUSALS } from '#fakes/payments/refusals'
import type { RunningPayments } from '#fakes/payments/server'
import type { WireAnswer, WireRequest } from './support'
import { anything, ask, openSession, order, paidSession, readState, SESSION, startStandIn } from './support'

type Provoke = (running: RunningPayments) => Promise<WireAnswer>

const SESSIONS = '/v1/checkout/sessions'
const LINE = 'line_items[0]'

/** A checkout session with some parameters other than the sound ones; undefined leaves one out. */
function session(change: Readonly<Record<string, string | undefined>>, more: Omit<WireRequest, 'form'> = {}): Provoke {
  const entries = Object.entries({ ...SESSION, ...change }).filter((entry): entry is [string, string] => entry[1] !== undefined)
  return running => ask(running, SESSIONS, { ...more, form: Object.fromEntries(entries) })
}

const control = (path: string, body: object | string = {}): Provoke => running =>
  ask(running, `/__fake__/${path}`, { method: 'POST', body: typeof body === 'string' ? body : JSON.stringify(body) })

const refund = (running: RunningPayments, form: Readonly<Record<string, string>>) => ask(running, '/v1/refunds', { form })

const secondsFromNow = (seconds: number) => String(Math.floor(Date.now() / 1000) + seconds)

async function dispute(running: RunningPayments): Promise<{ paymentIntentId: string, disputeId: string }> {
  const { paymentIntentId } = await paidSession(running)
  await order(running, `payment_intents/${paymentIntentId}/dispute`, {}, anything)
  const [disputeId = ''] = Object.keys((await readState(running)).disputes)
  return { paymentIntentId, disputeId }
}

async function unpaidIntent(running: RunningPayments): Promise<string> {
  const { id } = await openSession(running)
  await order(running, `sessions/${id}/decline`, {}, anything)
  const { body } = await ask(running, `${SESSIONS}/${id}`)
  return String(body.payment_intent)
}

const keyed = (key: string) => ({ headers: { 'Idempotency-Key': key } })

const PROVOKE: Record<RefusalName, Provoke> = {
  'key-missing': running => ask(running, SESSIONS, { headers: { Authorization: '' } }),
  'key-wrong': running => ask(running, SESSIONS, { headers: { Authorization: 'Bearer sk_test_other' } }),
  'version-unreadable': running => ask(running, SESSIONS, { headers: { 'Stripe-Version': 'newest' } }),
  'request-unknown': running => ask(running, '/v1/customers'),
  'form-expected': running => ask(running, SESSIONS, { body: '{"mode":"payment"}', headers: { 'Content-Type': 'application/json' } }),
  'body-too-large': session({ client_reference_id: 'x'.repeat(1_000_001) }),
  'parameter-unknown': session({ [`${LINE}[price_data][product_data][colour]`]: 'red' }),
  'parameter-missing': session({ [`${LINE}[price_data][unit_amount]`]: undefined }),
  'parameter-empty': session({ client_reference_id: '' }),
  'parameter-integer': session({ [`${LINE}[price_data][unit_amount]`]: '48.00' }),
  'parameter-shape': session({ 'success_url': undefined, 'success_url[href]': 'http://127.0.0.1/' }),
  'parameter-value': session({ mode: 'subscription' }),
  'parameter-too-long': session({ client_reference_id: 'x'.repeat(201) }),
  'url-invalid': session({ cancel_url: 'javascript:alert(1)' }),
  'email-invalid': session({ customer_email: 'nobody' }),
  'metadata-too-large': session({ 'metadata[note]': 'x'.repeat(501) }),
  'expand-unknown': session({ 'expand[0]': 'customer' }),
  'resource-missing': running => ask(running, '/v1/payment_intents/pi_unknown'),
  'reference-missing': running => refund(running, { payment_intent: 'pi_unknown' }),
  'currency-unknown': session({ [`${LINE}[price_data][currency]`]: 'xyz' }),
  'currencies-differ': session({
    'line_items[1][price_data][currency]': 'eur',
    'line_items[1][price_data][product_data][name]': 'Second lesson',
    'line_items[1][price_data][unit_amount]': '4800',
    'line_items[1][quantity]': '1',
  }),
  'amount-too-small': session({ [`${LINE}[price_data][unit_amount]`]: '29' }),
  'amount-too-large': session({ [`${LINE}[price_data][unit_amount]`]: '100000000' }),
  'expiry-too-soon': session({ expires_at: secondsFromNow(29 * 60) }),
  'expiry-too-late': session({ expires_at: secondsFromNow(25 * 3600) }),
  'session-not-open': async (running) => {
    const { id } = await paidSession(running)
    return ask(running, `${SESSIONS}/${id}/expire`, { method: 'POST' })
  },
  'session-paid': async (running) => {
    const { id } = await paidSession(running)
    return control(`sessions/${id}/pay`)(running)
  },
  'session-expired': async (running) => {
    const { id } = await openSession(running)
    await ask(running, `${SESSIONS}/${id}/expire`, { method: 'POST' })
    return control(`sessions/${id}/pay`)(running)
  },
  'refund-of-nothing': running => refund(running, { amount: '100' }),
  'refund-of-two': running => refund(running, { payment_intent: 'pi_1', charge: 'ch_1' }),
  'refund-of-unpaid': async running => refund(running, { payment_intent: await unpaidIntent(running) }),
  'refund-again': async (running) => {
    const { paymentIntentId } = await paidSession(running)
    await refund(running, { payment_intent: paymentIntentId })
    return refund(running, { payment_intent: paymentIntentId })
  },
  'refund-too-large': async (running) => {
    const { paymentIntentId } = await paidSession(running)
    await refund(running, { payment_intent: paymentIntentId, amount: '4000' })
    return refund(running, { payment_intent: paymentIntentId, amount: '801' })
  },
  'refund-disputed': async running => refund(running, { payment_intent: (await dispute(running)).paymentIntentId }),
  'dispute-of-unpaid': async running => control(`payment_intents/${await unpaidIntent(running)}/dispute`)(running),
  'dispute-again': async running => control(`payment_intents/${(await dispute(running)).paymentIntentId}/dispute`)(running),
  'dispute-closed': async (running) => {
    const { disputeId } = await dispute(running)
    await order(running, `disputes/${disputeId}/close`, { status: 'lost' }, anything)
    return control(`disputes/${disputeId}/close`, { status: 'won' })(running)
  },
  'idempotency-key-long': session({}, keyed('k'.repeat(256))),
  'idempotency-other-parameters': async (running) => {
    await session({}, keyed('k'))(running)
    return session({ client_reference_id: 'another' }, keyed('k'))(running)
  },
  'idempotency-other-path': async (running) => {
    await session({}, keyed('k'))(running)
    return ask(running, '/v1/refunds', { form: SESSION, ...keyed('k') })
  },
  'idempotency-in-flight': async (running) => {
    await order(running, 'fail', { match: `POST ${SESSIONS}`, hang: true }, anything)
    const giveUp = new AbortController()
    const body = new URLSearchParams(SESSION)
    const first = fetch(`${running.url}${SESSIONS}`, {
      method: 'POST', body, signal: giveUp.signal, headers: { 'Authorization': 'Bearer sk_test_stand_in', 'Idempotency-Key': 'k' },
    }).catch(() => 'given up')
    while ((await readFailures(running)) > 0) await new Promise(resolve => setTimeout(resolve, 5))
    const second = await session({}, keyed('k'))(running)
    giveUp.abort()
    await first
    return second
  },
  'control-unreadable': control('hold', '{"on":"yes"}'),
  'webhook-address-missing': control('deliver'),
  'webhook-not-local': control('webhook', { url: 'https://example.com/webhooks/stripe' }),
}

async function readFailures(running: RunningPayments): Promise<number> {
  const { failures } = await readState(running)
  return Array.isArray(failures) ? failures.length : 0
}

const ROWS = Object.entries(PROVOKE)
const table: Readonly<Record<string, Refusal>> = REFUSALS

describe('refusals', () => {
  it('[house.fakes] the table and its tests name the same rows', () => {
    expect(ROWS.map(([name]) => name).sort()).toEqual(Object.keys(REFUSALS).sort())
  })

  it.each(ROWS)('[house.fakes] %s', async (name, provoke) => {
    const running = await startStandIn()
    const answer = await provoke(running)
    expect(answer.headers.get('stand-in-refusal')).toBe(name)
    const { status, type, code } = table[name] ?? {}
    expect([answer.status, answer.body.error?.type, answer.body.error?.code]).toEqual([status, type, code])
    expect(answer.body.error?.message).toMatch(/\w/)
  })

  it('[house.fakes] a sound request is not refused', async () => {
    const running = await startStandIn()
    const answer = await session({ 'expires_at': secondsFromNow(31 * 60), 'metadata[order]': 'o1', 'customer_email': 'a@b.test' }, keyed('k'))(running)
    expect(answer.status).toBe(200)
    expect(answer.headers.get('stand-in-refusal')).toBeNull()
  })
})

describe('edges of the refusals', () => {
  it('takes exactly the minimum, the maximum, and all that is left', async () => {
    const running = await startStandIn()
    expect((await session({ [`${LINE}[price_data][unit_amount]`]: '30' })(running)).status).toBe(200)
    expect((await session({ [`${LINE}[price_data][unit_amount]`]: '99999999' })(running)).status).toBe(200)
    const { paymentIntentId } = await paidSession(running)
    expect((await refund(running, { payment_intent: paymentIntentId, amount: '4000' })).status).toBe(200)
    expect((await refund(running, { payment_intent: paymentIntentId, amount: '800' })).status).toBe(200)
    expect(Object.values((await readState(running)).refunds).map(row => row.amount).sort()).toEqual([4000, 800])
  })

  it('names the parameter as the wire spells it', async () => {
    const running = await startStandIn()
    const unknown = await PROVOKE['parameter-unknown'](running)
    const missing = await PROVOKE['parameter-missing'](running)
    expect(unknown.body.error?.param).toBe('line_items[0][price_data][product_data][colour]')
    expect(missing.body.error?.param).toBe('line_items[0][price_data][unit_amount]')
  })

  it('says what to add for a request it does not know', async () => {
    const running = await startStandIn()
    expect((await ask(running, '/v1/customers')).body.error?.message).toContain('fakes/payments/routes.ts')
    expect((await ask(running, '/elsewhere')).body.error?.message).toContain('fakes/payments/hosted.ts')
    expect((await ask(running, '/__fake__/nothing')).body.error?.message).toContain('fakes/payments/control.ts')
    expect((await PROVOKE['parameter-unknown'](running)).body.error?.message).toContain('fakes/payments/parameters.ts')
  })

  it('changes nothing when it refuses', async () => {
    const running = await startStandIn()
    const { paymentIntentId } = await paidSession(running)
    await refund(running, { payment_intent: paymentIntentId, amount: '4801' })
    const state = await readState(running)
    expect(state.refunds).toEqual({})
    expect(Object.values(state.charges).map(charge => charge.amount_refunded)).toEqual([0])
    expect(state.events.map(event => event.type)).toEqual(['payment_intent.succeeded', 'checkout.session.completed'])
  })

  it('keeps names like __proto__ as unknown parameters', async () => {
    const running = await startStandIn()
    const answer = await session({ '__proto__[polluted]': 'yes' })(running)
    expect(answer.headers.get('stand-in-refusal')).toBe('parameter-unknown')
    expect('polluted' in {}).toBe(false)
  })
})
