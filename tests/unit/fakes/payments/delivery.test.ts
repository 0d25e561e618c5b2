import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { signatureHeader } from '#fakes/payments/signature'
import type { RunningPayments } from '#fakes/payments/server'
import type { Receiver } from './support'
import { adapterFor, anything, ask, openSession, order, paidSession, readState, startReceiver, startStandIn, WEBHOOK_SECRET, EVENTUALLY } from './support'

const deliveredSchema = z.object({ deliveries: z.array(z.object({ eventId: z.string(), type: z.string(), answer: z.union([z.number(), z.string()]) })) })

const deliver = async (running: RunningPayments, how: object) => (await order(running, 'deliver', how, deliveredSchema)).deliveries

const hold = (running: RunningPayments, on: boolean) => order(running, 'hold', { on }, anything)

/** Paid, refunded and disputed, with nothing delivered yet: four events in a known order. */
async function heldEvents(): Promise<{ running: RunningPayments, receiver: Receiver, ids: string[] }> {
  const receiver = await startReceiver()
  const running = await startStandIn({ webhookUrl: receiver.url })
  await hold(running, true)
  const { paymentIntentId } = await paidSession(running)
  await ask(running, '/v1/refunds', { form: { payment_intent: paymentIntentId, amount: '100' } })
  await order(running, `payment_intents/${paymentIntentId}/dispute`, {}, anything)
  const { events } = await readState(running)
  expect(events.map(event => event.type)).toEqual([
    'payment_intent.succeeded', 'checkout.session.completed', 'charge.refunded', 'charge.dispute.created',
  ])
  return { running, receiver, ids: events.map(event => event.id) }
}

const deliveryStates = async (running: RunningPayments) => Object.values((await readState(running)).deliveries).map(delivery => delivery.state)

describe('delivery by itself', () => {
  it('[house.fakes] signs the raw body it sends, in the provider\'s header', async () => {
    const receiver = await startReceiver()
    const running = await startStandIn({ webhookUrl: receiver.url })
    await paidSession(running)
    await expect.poll(() => receiver.received.length, EVENTUALLY).toBe(2)
    for (const { rawBody, signature, headers } of receiver.received) {
      const atSeconds = Number(/^t=(\d+),v1=[0-9a-f]{64}$/.exec(signature)?.[1])
      expect(Math.abs(Date.now() / 1000 - atSeconds)).toBeLessThan(5)
      expect(signature).toBe(signatureHeader(rawBody, WEBHOOK_SECRET, atSeconds))
      expect(headers['content-type']).toBe('application/json; charset=utf-8')
    }
  })

  it('[house.fakes] tries again with growing waits until the answer is 2xx, then stops', async () => {
    const receiver = await startReceiver([500, 302, 404])
    const running = await startStandIn({ webhookUrl: receiver.url, retryDelaysMs: [20, 40, 80, 160] })
    const { id } = await openSession(running)
    await order(running, `sessions/${id}/expire`, {}, anything)
    await expect.poll(() => deliveryStates(running), EVENTUALLY).toEqual(['delivered'])
    const { deliveries, events } = await readState(running)
    const attempts = Object.values(deliveries)[0]?.attempts ?? []
    expect(attempts.map(attempt => attempt.answer)).toEqual([500, 302, 404, 200])
    const atMs = z.array(z.looseObject({ atMs: z.number() })).parse(attempts).map(attempt => attempt.atMs)
    const waits = atMs.slice(1).map((at, index) => at - (atMs[index] ?? 0))
    for (const [index, leastMs] of [20, 40, 80].entries()) expect(waits[index]).toBeGreaterThanOrEqual(leastMs - 1)
    expect(new Set(receiver.received.map(event => event.id)).size).toBe(1)
    expect(events.map(event => event.pending_webhooks)).toEqual([0])
    await new Promise(resolve => setTimeout(resolve, 250))
    expect(receiver.received).toHaveLength(4)
  })

  it('gives up visibly when the waits run out; the event is still pending there and can be sent by hand', async () => {
    const receiver = await startReceiver([500, 500, 500])
    const running = await startStandIn({ webhookUrl: receiver.url, retryDelaysMs: [10, 10] })
    const { id } = await openSession(running)
    await order(running, `sessions/${id}/expire`, {}, anything)
    await expect.poll(() => deliveryStates(running), EVENTUALLY).toEqual(['given-up'])
    expect(receiver.received).toHaveLength(3)
    expect((await deliver(running, {})).map(delivery => delivery.answer)).toEqual([200])
    expect(await deliveryStates(running)).toEqual(['delivered'])
  })

  it('reaches an app that comes up later, and one whose address is told later', async () => {
    const running = await startStandIn({ webhookUrl: 'http://127.0.0.1:9/webhooks/stripe', retryDelaysMs: [50, 50, 50, 50] })
    const { id } = await openSession(running)
    await order(running, `sessions/${id}/expire`, {}, anything)
    await expect.poll(async () => Object.values((await readState(running)).deliveries)[0]?.attempts.length, EVENTUALLY).toBeGreaterThan(0)
    const receiver = await startReceiver()
    await order(running, 'webhook', { url: receiver.url }, anything)
    await expect.poll(() => receiver.received.map(event => event.type), EVENTUALLY).toEqual(['checkout.session.expired'])
  })
})

describe('delivery on demand', () => {
  it('[house.fakes] holds everything back, then delivers each once', async () => {
    const { running, receiver, ids } = await heldEvents()
    await new Promise(resolve => setTimeout(resolve, 100))
    expect(receiver.received).toEqual([])
    await hold(running, false)
    await expect.poll(() => receiver.received.map(event => event.id).sort(), EVENTUALLY).toEqual([...ids].sort())
  })

  it('[house.fakes] twice: the same event, bodies alike, each signed', async () => {
    const { running, receiver, ids } = await heldEvents()
    const sent = await deliver(running, { eventId: ids[1], times: 2 })
    expect(sent.map(delivery => delivery.answer)).toEqual([200, 200])
    expect(receiver.received.map(event => event.id)).toEqual([ids[1], ids[1]])
    const payments = adapterFor(running)
    for (const { rawBody, signature } of receiver.received) {
      expect(payments.readEvent(rawBody, signature)).toMatchObject({ kind: 'checkout-completed' })
    }
  })

  it('[house.fakes] out of order: reversed, in a chosen order, or shuffled the same way for the same seed', async () => {
    const { running, receiver, ids } = await heldEvents()
    const orderOf = async (how: object) => {
      receiver.received.length = 0
      await deliver(running, how)
      return receiver.received.map(event => event.id)
    }
    expect(await orderOf({})).toEqual(ids)
    expect(await orderOf({ order: 'reversed' })).toEqual([...ids].reverse())
    expect(await orderOf({ eventIds: [ids[2], ids[0]] })).toEqual([ids[2], ids[0]])
    const shuffled = await orderOf({ order: 'shuffled', seed: 7, times: 2 })
    expect([...shuffled].sort()).toEqual([...ids, ...ids].sort())
    expect(await orderOf({ order: 'shuffled', seed: 7, times: 2 })).toEqual(shuffled)
    const orders = new Set<string>()
    for (let seed = 1; seed <= 20; seed += 1) orders.add((await orderOf({ order: 'shuffled', seed })).join())
    expect(orders.size).toBeGreaterThan(5)
  })

  it('[house.fakes] late, by type, and many at once', async () => {
    const { running, receiver } = await heldEvents()
    const startedMs = Date.now()
    await deliver(running, { type: 'charge.refunded', delayMs: 150 })
    expect(Date.now() - startedMs).toBeGreaterThanOrEqual(149)
    expect(receiver.received.map(event => event.type)).toEqual(['charge.refunded'])
    const sent = await deliver(running, { type: 'checkout.session.completed', times: 8, atOnce: true })
    expect(sent.map(delivery => delivery.answer)).toEqual(Array.from({ length: 8 }, () => 200))
    expect(receiver.received).toHaveLength(9)
  })

  it('what was delivered by hand is not delivered again when the hold ends', async () => {
    const { running, receiver, ids } = await heldEvents()
    await deliver(running, { eventIds: ids.slice(0, 3) })
    await hold(running, false)
    await expect.poll(() => receiver.received.map(event => event.id), EVENTUALLY).toEqual(ids)
    await new Promise(resolve => setTimeout(resolve, 50))
    expect(receiver.received).toHaveLength(4)
  })
})
