import { describe, expect, it } from 'vitest'
import type { RunningPayments } from '#fakes/payments/server'
import { anything, ask, openSession, order, paidSession, readState, startStandIn } from './support'

async function visit(url: string, method: 'GET' | 'POST' = 'GET') {
  const answer = await fetch(url, { method, redirect: 'manual' })
  return { status: answer.status, location: answer.headers.get('location'), html: await answer.text() }
}

const statusOf = async (running: RunningPayments, id: string) => (await readState(running)).sessions[id]?.status

describe('the page to pay on', () => {
  it('[house.fakes] shows what is bought, the amount, and three buttons', async () => {
    const running = await startStandIn()
    const { url } = await openSession(running, { 'line_items[0][quantity]': '2' })
    const { status, html } = await visit(url)
    expect(status).toBe(200)
    expect(html).toContain('<h1>Card page stand-in</h1>')
    expect(html).toContain('Full swing review × 2')
    expect(html).toContain('£96.00')
    expect(html).toContain('<html lang="en">')
    expect(html).toContain('name="viewport" content="width=device-width, initial-scale=1"')
    expect([...html.matchAll(/<form method="post" action="([^"]+)"><button[^>]*>([^<]+)<\/button>/g)].map(match => [new URL(match[1] ?? '', url).href, match[2]])).toEqual([
      [`${url}/pay`, 'Pay £96.00'], [`${url}/decline`, 'Pay with a card that is declined'], [`${url}/abandon`, 'Walk away'],
    ])
  })

  it('[house.fakes] paying sends on to the success address with the id of the session', async () => {
    const running = await startStandIn()
    const { id, url } = await openSession(running)
    expect(await visit(`${url}/pay`, 'POST')).toMatchObject({ status: 303, location: `http://127.0.0.1:3000/paid?session=${id}` })
    expect(await statusOf(running, id)).toBe('complete')
  })

  it('[house.fakes] a declined card is told, with another try; walking away changes nothing', async () => {
    const running = await startStandIn()
    const { id, url } = await openSession(running)
    const declined = await visit(`${url}/decline`, 'POST')
    expect(declined.status).toBe(200)
    expect(declined.html).toContain('<p class="problem" role="alert">The card was declined.')
    expect(declined.html).toContain(`action="/pay/${id}/pay"`)
    expect(await visit(`${url}/abandon`, 'POST')).toMatchObject({ status: 303, location: 'http://127.0.0.1:3000/back' })
    expect(await statusOf(running, id)).toBe('open')
    expect((await readState(running)).events.map(event => event.type)).toEqual(['payment_intent.payment_failed'])
  })

  it('[house.fakes] a second payment is refused and charges nothing', async () => {
    const running = await startStandIn()
    const { id, url } = await openSession(running)
    await visit(`${url}/pay`, 'POST')
    const second = await visit(`${url}/pay`, 'POST')
    expect(second.status).toBe(409)
    expect(second.html).toContain('Already paid')
    expect(second.html).toContain(`href="http://127.0.0.1:3000/paid?session=${id}"`)
    expect((await visit(`${url}/decline`, 'POST')).status).toBe(409)
    const { charges, events } = await readState(running)
    expect(Object.keys(charges)).toHaveLength(1)
    expect(events).toHaveLength(2)
  })

  it('[house.fakes] an expired session cannot be paid', async () => {
    const running = await startStandIn()
    const { id, url } = await openSession(running)
    await order(running, `sessions/${id}/expire`, {}, anything)
    expect((await visit(url)).html).not.toContain('<form')
    for (const [reply, status] of [[await visit(url), 200], [await visit(`${url}/pay`, 'POST'), 410], [await visit(`${url}/decline`, 'POST'), 410]] as const) {
      expect(reply.status).toBe(status)
      expect(reply.html).toContain('This payment has expired')
    }
    expect((await readState(running)).charges).toEqual({})
  })

  it('shows a name that looks like markup as text, and an unknown session as missing', async () => {
    const running = await startStandIn()
    const { url } = await openSession(running, { 'line_items[0][price_data][product_data][name]': '<script>alert(1)</script>' })
    expect((await visit(url)).html).toContain('&lt;script&gt;alert(1)&lt;/script&gt;')
    expect((await visit(`${running.url}/pay/cs_test_unknown`)).status).toBe(404)
  })

  it.each([['jpy', '500', '¥500'], ['eur', '1250', '€12.50'], ['sek', '30000', 'SEK\u00A0300.00']])('writes %s %s as %s', async (currency, amount, written) => {
    const running = await startStandIn()
    const { url } = await openSession(running, { 'line_items[0][price_data][currency]': currency, 'line_items[0][price_data][unit_amount]': amount })
    expect((await visit(url)).html).toContain(written)
  })

  it('can be told to fail like any request', async () => {
    const running = await startStandIn()
    const { id, url } = await openSession(running)
    await order(running, 'fail', { match: `POST /pay/${id}/pay`, after: 'commit' }, anything)
    await expect(visit(`${url}/pay`, 'POST')).rejects.toThrow()
    expect(await statusOf(running, id)).toBe('complete')
  })
})

describe('control', () => {
  it('[house.fakes] resets to nothing but the webhook address', async () => {
    const running = await startStandIn()
    await order(running, 'webhook', { url: 'http://127.0.0.1:9/webhooks/stripe' }, anything)
    await order(running, 'hold', { on: true }, anything)
    const { id } = await paidSession(running)
    await order(running, 'fail', { match: '*', status: 500 }, anything)
    await order(running, 'reset', {}, anything)
    expect((await ask(running, `/v1/checkout/sessions/${id}`)).status).toBe(404)
    expect(await readState(running)).toMatchObject({
      sessions: {}, charges: {}, events: [], deliveries: {}, failures: [], isHolding: false, webhookUrl: 'http://127.0.0.1:9/webhooks/stripe',
    })
  })

  it('[house.fakes] fails the ordered number of times, on the ordered request only', async () => {
    const running = await startStandIn()
    await order(running, 'fail', { match: 'GET /v1/events$', status: 503, times: 2 }, anything)
    const statuses: number[] = []
    for (const path of ['/v1/events/evt_1', '/v1/events', '/v1/refunds', '/v1/events', '/v1/events']) {
      statuses.push((await ask(running, path)).status)
    }
    expect(statuses).toEqual([404, 503, 200, 503, 200])
  })

  it('needs exactly one way to fail', async () => {
    const running = await startStandIn()
    await expect(order(running, 'fail', { match: '*' }, anything)).rejects.toThrow('exactly one')
    await expect(order(running, 'fail', { match: '*', status: 500, reset: true }, anything)).rejects.toThrow('exactly one')
  })
})
