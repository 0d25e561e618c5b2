import Stripe from 'stripe'
import { describe, expect, it } from 'vitest'
import type { RunningPayments } from '#fakes/payments/server'
import type { CheckoutInput, Payments } from '#server/adapters/payments'
import { createPayments, PaymentsRefused, PaymentsUnavailable } from '#server/adapters/payments'
import { adapterFor, anything, order, readState, SECRET_KEY, startReceiver, startStandIn, EVENTUALLY } from './support'

const INPUT: CheckoutInput = {
  reference: 'order-1',
  items: [{ name: 'Full swing review', unitAmountMinor: 4800, quantity: 1 }, { name: 'Second swing', unitAmountMinor: 1500, quantity: 2 }],
  currency: 'gbp',
  successUrl: 'http://127.0.0.1:3000/paid?session={CHECKOUT_SESSION_ID}',
  cancelUrl: 'http://127.0.0.1:3000/back',
  customerEmail: 'student@demo.turfnote.test',
  metadata: { reviewId: 'review-1' },
  idempotencyKey: 'checkout-order-1',
}

async function start(): Promise<{ running: RunningPayments, payments: Payments }> {
  const running = await startStandIn()
  return { running, payments: adapterFor(running) }
}

async function pay({ running, payments }: { running: RunningPayments, payments: Payments }): Promise<string> {
  const { id } = await payments.createCheckout(INPUT)
  await order(running, `sessions/${id}/pay`, {}, anything)
  const { paymentIntentId } = await payments.getCheckout(id)
  if (paymentIntentId === null) throw new Error('not paid')
  return paymentIntentId
}

const failTimes = (running: RunningPayments, failure: object) => order(running, 'fail', failure, anything)

const posts = async (running: RunningPayments, path: string) =>
  (await readState(running)).requests.filter(request => request.method === 'POST' && request.path === path)

describe('checkout through the SDK', () => {
  it('[house.fakes] opens a page, shows it unpaid, then paid', async () => {
    const both = await start()
    const { running, payments } = both
    const expiresAtMs = (Math.floor(Date.now() / 1000) + 3600) * 1000
    const opened = await payments.createCheckout({ ...INPUT, expiresAtMs: expiresAtMs - 400 })
    expect(opened).toEqual({ id: opened.id, url: `${running.url}/pay/${opened.id}`, expiresAtMs })

    const before = await payments.getCheckout(opened.id)
    expect(before).toEqual({
      id: opened.id, url: opened.url, status: 'open', isPaid: false, amountMinor: 7800, currency: 'gbp', reference: 'order-1',
      paymentIntentId: null, metadata: { reviewId: 'review-1', reference: 'order-1' }, createdAtMs: before.createdAtMs, expiresAtMs,
    })

    await order(running, `sessions/${opened.id}/pay`, {}, anything)
    const after = await payments.getCheckout(opened.id)
    expect(after).toMatchObject({ status: 'complete', isPaid: true, url: null })
    const intent = await payments.getPaymentIntent(after.paymentIntentId ?? '')
    expect(intent).toEqual({
      id: after.paymentIntentId, status: 'succeeded', amountMinor: 7800, currency: 'gbp', receivedMinor: 7800, refundedMinor: 0, isDisputed: false,
      latestChargeId: intent.latestChargeId, lastDecline: null, reference: 'order-1',
      metadata: { reviewId: 'review-1', reference: 'order-1' }, createdAtMs: intent.createdAtMs,
    })
    expect(intent.latestChargeId).toMatch(/^ch_/)
  })

  it('[house.fakes] a declined card leaves the page open, and a second card pays', async () => {
    const { running, payments } = await start()
    const { id } = await payments.createCheckout(INPUT)
    await order(running, `sessions/${id}/decline`, {}, anything)
    const declined = await payments.getCheckout(id)
    const paymentIntentId = declined.paymentIntentId ?? ''
    expect(declined).toMatchObject({ status: 'open', isPaid: false })
    expect(await payments.getPaymentIntent(paymentIntentId)).toMatchObject({
      status: 'unpaid', receivedMinor: 0, lastDecline: { code: 'generic_decline', message: 'Your card was declined.' },
    })
    await order(running, `sessions/${id}/pay`, {}, anything)
    expect(await payments.getCheckout(id)).toMatchObject({ isPaid: true, paymentIntentId })
    expect(await payments.getPaymentIntent(paymentIntentId)).toMatchObject({ status: 'succeeded', lastDecline: null })
  })

  it('[house.fakes] a page is closed on request, cannot be paid then, and can be closed twice', async () => {
    const { running, payments } = await start()
    const { id } = await payments.createCheckout(INPUT)
    expect(await payments.expireCheckout(id)).toMatchObject({ status: 'expired', isPaid: false, url: null })
    expect(await payments.expireCheckout(id)).toMatchObject({ status: 'expired' })
    await expect(order(running, `sessions/${id}/pay`, {}, anything)).rejects.toThrow('has expired')
  })

  it('a page nobody pays closes by itself when its time is over', async () => {
    let nowMs = Date.now()
    const running = await startStandIn({ now: () => nowMs })
    const payments = adapterFor(running)
    const { id, expiresAtMs } = await payments.createCheckout(INPUT)
    expect(expiresAtMs).toBe((Math.floor(nowMs / 1000) + 24 * 3600) * 1000)
    nowMs = expiresAtMs - 1
    expect(await payments.getCheckout(id)).toMatchObject({ status: 'open' })
    nowMs = expiresAtMs
    expect(await payments.getCheckout(id)).toMatchObject({ status: 'expired', isPaid: false })
    expect((await readState(running)).events.map(event => event.type)).toEqual(['checkout.session.expired'])
  })

  it('names a refusal with the provider\'s code and parameter', async () => {
    const { payments } = await start()
    await expect(payments.getCheckout('cs_test_unknown')).rejects.toMatchObject({ name: 'PaymentsRefused', code: 'resource_missing' })
    await expect(payments.createCheckout({ ...INPUT, expiresAtMs: Date.now() + 60_000 })).rejects.toMatchObject({ param: 'expires_at' })
    await expect(payments.createCheckout({ ...INPUT, items: [{ name: 'Tip', unitAmountMinor: 1, quantity: 1 }] })).rejects.toMatchObject({ code: 'amount_too_small' })
  })
})

describe('refunds and disputes through the SDK', () => {
  it('[house.fakes] gives back in parts, once per key, and never more than was paid', async () => {
    const both = await start()
    const { payments } = both
    const paymentIntentId = await pay(both)
    const first = await payments.refund({ paymentIntentId, amountMinor: 5000, metadata: { order: 'order-1' } }, 'refund-1')
    expect(first).toMatchObject({ status: 'succeeded', amountMinor: 5000, currency: 'gbp', paymentIntentId, metadata: { order: 'order-1' } })
    expect(await payments.refund({ paymentIntentId, amountMinor: 5000, metadata: { order: 'order-1' } }, 'refund-1')).toEqual(first)
    await expect(payments.refund({ paymentIntentId, amountMinor: 2801 }, 'refund-2')).rejects.toMatchObject({ name: 'PaymentsRefused', param: 'amount' })
    const second = await payments.refund({ paymentIntentId, amountMinor: 2800 }, 'refund-3')
    await expect(payments.refund({ paymentIntentId, amountMinor: 1 }, 'refund-4')).rejects.toMatchObject({ code: 'charge_already_refunded' })
    expect(await payments.listRefunds(paymentIntentId)).toEqual([second, first])
    expect(await payments.getPaymentIntent(paymentIntentId)).toMatchObject({ status: 'succeeded', receivedMinor: 7800, refundedMinor: 7800 })
  })

  it('the same key for another refund is refused', async () => {
    const both = await start()
    const paymentIntentId = await pay(both)
    await both.payments.refund({ paymentIntentId, amountMinor: 100 }, 'key')
    await expect(both.payments.refund({ paymentIntentId, amountMinor: 200 }, 'key')).rejects.toBeInstanceOf(PaymentsRefused)
  })

  it.each(['won', 'lost'] as const)('[house.fakes] a dispute that is %s', async (status) => {
    const both = await start()
    const { running, payments } = both
    const paymentIntentId = await pay(both)
    await payments.refund({ paymentIntentId, amountMinor: 800 }, 'part')
    await order(running, `payment_intents/${paymentIntentId}/dispute`, {}, anything)
    const [disputeId = ''] = Object.keys((await readState(running)).disputes)
    expect(await payments.getDispute(disputeId)).toMatchObject({ status: 'open', amountMinor: 7000, currency: 'gbp', paymentIntentId })
    await expect(payments.refund({ paymentIntentId, amountMinor: 1 }, 'during')).rejects.toMatchObject({ code: 'charge_disputed' })
    await order(running, `disputes/${disputeId}/close`, { status }, anything)
    expect(await payments.getDispute(disputeId)).toMatchObject({ status })
    expect(await payments.getPaymentIntent(paymentIntentId)).toMatchObject({ isDisputed: true, refundedMinor: 800 })
    const after = payments.refund({ paymentIntentId, amountMinor: 1 }, 'after')
    if (status === 'won') expect(await after).toMatchObject({ amountMinor: 1 })
    else await expect(after).rejects.toMatchObject({ code: 'charge_disputed' })
  })
})

describe('failures on purpose, through the SDK', () => {
  it('[house.fakes] a connection cut after the change: the SDK asks again with the same key, one session exists', async () => {
    const { running, payments } = await start()
    await failTimes(running, { match: 'POST /v1/checkout/sessions', after: 'commit' })
    const { id } = await payments.createCheckout(INPUT)
    expect(Object.keys((await readState(running)).sessions)).toEqual([id])
    const asked = await posts(running, '/v1/checkout/sessions')
    expect(asked.map(request => [request.outcome, request.isReplay, request.idempotencyKey]))
      .toEqual([['reset after commit', false, INPUT.idempotencyKey], [200, true, INPUT.idempotencyKey]])
  })

  it('[house.fakes] a connection cut before the change: asked again, done once', async () => {
    const both = await start()
    const paymentIntentId = await pay(both)
    await failTimes(both.running, { match: 'POST /v1/refunds', reset: true, times: 2 })
    await both.payments.refund({ paymentIntentId, amountMinor: 7800 }, 'back')
    expect((await posts(both.running, '/v1/refunds')).map(request => request.outcome)).toEqual(['reset', 'reset', 200])
    expect(Object.values((await readState(both.running)).refunds).map(refund => refund.amount)).toEqual([7800])
  })

  it('[house.fakes] an error after the change is unavailable to the caller, and the same key finds the refund later', async () => {
    const both = await start()
    const paymentIntentId = await pay(both)
    await failTimes(both.running, { match: 'POST /v1/refunds', status: 500, after: 'commit', times: 3 })
    await expect(both.payments.refund({ paymentIntentId, amountMinor: 100 }, 'back')).rejects.toBeInstanceOf(PaymentsUnavailable)
    const refund = await both.payments.refund({ paymentIntentId, amountMinor: 100 }, 'back')
    expect(await both.payments.listRefunds(paymentIntentId)).toEqual([refund])
  })

  it.each([500, 503, 429])('status %i is unavailable, not refused', async (status) => {
    const { running, payments } = await start()
    await failTimes(running, { match: '*', status, times: 3 })
    await expect(payments.getCheckout('cs_test_1')).rejects.toBeInstanceOf(PaymentsUnavailable)
  })

  it('a provider that cannot be reached is unavailable, and so is one that rejects our key', async () => {
    const { running } = await start()
    const wrongKey = createPayments({ secretKey: 'sk_test_wrong', webhookSecret: 'whsec_x', apiBase: running.url })
    await expect(wrongKey.getCheckout('cs_test_1')).rejects.toBeInstanceOf(PaymentsUnavailable)
    const adapter = adapterFor(running)
    await running.close()
    await expect(adapter.getCheckout('cs_test_1')).rejects.toBeInstanceOf(PaymentsUnavailable)
  })

  it('a hanging provider is given up by the SDK\'s own time limit, and the change is not made', async () => {
    const { running } = await start()
    await failTimes(running, { match: 'POST /v1/checkout/sessions', hang: true })
    const { hostname, port } = new URL(running.url)
    const stripe = new Stripe(SECRET_KEY, { host: hostname, port, protocol: 'http', timeout: 200, maxNetworkRetries: 0 })
    await expect(stripe.checkout.sessions.create({ mode: 'payment', success_url: INPUT.successUrl })).rejects.toBeInstanceOf(Stripe.errors.StripeConnectionError)
    expect((await readState(running)).sessions).toEqual({})
  })
})

describe('lists and expansion through the SDK', () => {
  it('pages through sessions and events without missing or repeating one', async () => {
    const { running, payments } = await start()
    const ids: string[] = []
    for (let count = 0; count < 5; count += 1) {
      const { id } = await payments.createCheckout({ ...INPUT, idempotencyKey: `checkout-${count}` })
      await order(running, `sessions/${id}/expire`, {}, anything)
      ids.unshift(id)
    }
    const { hostname, port } = new URL(running.url)
    const stripe = new Stripe(SECRET_KEY, { host: hostname, port, protocol: 'http' })
    const listed: string[] = []
    for await (const session of stripe.checkout.sessions.list({ limit: 2 })) listed.push(session.id)
    expect(listed).toEqual(ids)
    const events = await stripe.events.list({ limit: 2, type: 'checkout.session.expired' })
    expect(events.has_more).toBe(true)
    expect((await stripe.checkout.sessions.list({ status: 'open' })).data).toEqual([])
    const [event] = events.data
    expect((await stripe.events.retrieve(event?.id ?? '')).type).toBe('checkout.session.expired')
  })

  it('expands the payment down to its charge', async () => {
    const both = await start()
    const paymentIntentId = await pay(both)
    const { hostname, port } = new URL(both.running.url)
    const stripe = new Stripe(SECRET_KEY, { host: hostname, port, protocol: 'http' })
    const { data: [session] } = await stripe.checkout.sessions.list({
      payment_intent: paymentIntentId, expand: ['data.line_items', 'data.payment_intent.latest_charge'],
    })
    expect(session?.line_items?.data.map(line => [line.description, line.quantity, line.amount_total]))
      .toEqual([['Full swing review', 1, 4800], ['Second swing', 2, 3000]])
    expect(session?.payment_intent).toMatchObject({ id: paymentIntentId, latest_charge: { amount: 7800, paid: true } })
    const charge = await stripe.charges.retrieve((await both.payments.getPaymentIntent(paymentIntentId)).latestChargeId ?? '')
    expect(charge.payment_intent).toBe(paymentIntentId)
  })
})

describe('events through the adapter', () => {
  it('[house.fakes] every kind of event arrives signed and names its object', async () => {
    const receiver = await startReceiver()
    const running = await startStandIn({ webhookUrl: receiver.url })
    const payments = adapterFor(running)
    const declined = await payments.createCheckout(INPUT)
    await order(running, `sessions/${declined.id}/decline`, {}, anything)
    await payments.expireCheckout(declined.id)
    const { id } = await payments.createCheckout({ ...INPUT, idempotencyKey: 'other' })
    await order(running, `sessions/${id}/pay`, {}, anything)
    const paymentIntentId = (await payments.getCheckout(id)).paymentIntentId ?? ''
    await payments.refund({ paymentIntentId, amountMinor: 100 }, 'back')
    await order(running, `payment_intents/${paymentIntentId}/dispute`, {}, anything)
    const [disputeId = ''] = Object.keys((await readState(running)).disputes)
    await order(running, `disputes/${disputeId}/close`, { status: 'won' }, anything)
    await expect.poll(() => receiver.received.length, EVENTUALLY).toBe(7)

    const events = receiver.received.map(({ rawBody, signature }) => payments.readEvent(rawBody, signature))
    const byType = Object.fromEntries(events.map(event => [event.type, event]))
    expect(byType).toMatchObject({
      'payment_intent.payment_failed': { kind: 'payment-failed', reference: 'order-1' },
      'checkout.session.expired': { kind: 'checkout-expired', checkoutId: declined.id, reference: 'order-1' },
      'payment_intent.succeeded': { kind: 'payment-succeeded', paymentIntentId, reference: 'order-1' },
      'checkout.session.completed': { kind: 'checkout-completed', checkoutId: id, reference: 'order-1' },
      'charge.refunded': { kind: 'payment-refunded', paymentIntentId },
      'charge.dispute.created': { kind: 'dispute-opened', disputeId, paymentIntentId },
      'charge.dispute.closed': { kind: 'dispute-closed', disputeId, paymentIntentId },
    })
  })
})
