import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { listMessages, messagesTo } from '#tests/support/mail'
import { saveLetter, sendClip, startDraft } from '#tests/support/path'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World
let singleId: string
let seriesId: string

const offers = z.object({ items: z.array(z.object({ id: z.string(), kind: z.string(), priceMinor: z.number() })) })
const submitted = z.object({ review: z.object({ id: z.string(), state: z.string() }), checkoutUrl: z.string().nullable() })
const errorAnswer = z.object({ statusCode: z.number(), data: z.object({ code: z.string() }) })

beforeAll(async () => {
  world = await startWorld({ index: 5 })
  const { items } = offers.parse((await call(world, 'GET', '/api/offers')).body)
  singleId = items.find(offer => offer.kind === 'single')?.id ?? ''
  seriesId = items.find(offer => offer.kind === 'series')?.id ?? ''
})

afterAll(() => world.close())

async function ready(): Promise<string> {
  const id = await startDraft(world, 'student2')
  await sendClip(world, 'student2', id)
  return id
}

async function goToPay(id: string, offerId = singleId) {
  const answer = await call(world, 'POST', `/api/reviews/${id}/submit`, { as: 'student2', body: { payBy: 'card', offerId } })
  expect(answer.status).toBe(200)
  return submitted.parse(answer.body).checkoutUrl ?? ''
}

const sessionOf = (checkoutUrl: string) => /cs_[A-Za-z0-9_]+/.exec(checkoutUrl)?.[0] ?? ''

async function fake(path: string, body: unknown = {}): Promise<void> {
  const answer = await fetch(`${world.standIns.paymentsUrl}${path}`, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) })
  if (!answer.ok) throw new Error(`${path}: ${answer.status} ${await answer.text()}`)
}

async function stateOf(id: string): Promise<string> {
  return z.object({ state: z.string() }).parse((await call(world, 'GET', `/api/reviews/${id}`, { as: 'student2' })).body).state
}

function ledger(): { sums: Record<string, number>, unbalanced: unknown[] } {
  return arrange(world, (database) => {
    const rows = z.array(z.object({ account: z.string(), total: z.number() })).parse(database.prepare('select account, sum(amount_minor) as total from ledger_entries group by account').all())
    return {
      sums: Object.fromEntries(rows.map(row => [row.account, row.total])),
      unbalanced: database.prepare('select movement_id from ledger_entries group by movement_id having sum(amount_minor) <> 0').all(),
    }
  })
}

describe('paying by card', () => {
  it('puts the review into the queue by the provider\'s event alone, with the quoted promise, a receipt and a balanced ledger', async () => {
    const id = await ready()
    const url = await goToPay(id)
    expect(await stateOf(id)).toBe('unpaid')
    await fake(`/__fake__/sessions/${sessionOf(url)}/pay`)
    await expect.poll(() => stateOf(id), { timeout: 10_000 }).toBe('waiting')
    const order = arrange(world, database => z.object({ quoted_promise_at_ms: z.number(), state: z.string() }).parse(database.prepare('select * from orders where review_id = ?').get(id)))
    expect((await call(world, 'GET', `/api/reviews/${id}`, { as: 'student2' })).body).toMatchObject({ turnaround: { promisedAtMs: order.quoted_promise_at_ms } })
    const receipt = await messagesTo(world, 'student2@demo.turfnote.test', mail => mail.subject.startsWith('Receipt'))
    expect(receipt.text).toContain('£45')
    expect(ledger().unbalanced).toEqual([])
    expect(ledger().sums).toMatchObject({ card: 4500, owed: -4500 })
  })

  it('gives the same page to a second click, and charges once when the page is paid', async () => {
    const id = await ready()
    expect(await goToPay(id)).toBe(await goToPay(id))
    expect(arrange(world, database => database.prepare('select count(*) as n from orders where review_id = ?').get(id))).toEqual({ n: 1 })
  })

  it('makes the review a draft again when the student walks away, and nothing can be paid on the old page', async () => {
    const id = await ready()
    const url = await goToPay(id)
    expect((await call(world, 'POST', `/api/reviews/${id}/settle`, { as: 'student2', body: {} })).status).toBe(200)
    expect(await stateOf(id)).toBe('draft')
    await expect(fake(`/__fake__/sessions/${sessionOf(url)}/pay`)).rejects.toThrow()
  })

  it('keeps the review payable after a decline', async () => {
    const id = await ready()
    const url = await goToPay(id)
    await fake(`/__fake__/sessions/${sessionOf(url)}/decline`)
    expect(await stateOf(id)).toBe('unpaid')
    expect(await goToPay(id)).toBe(url)
    await fake(`/__fake__/sessions/${sessionOf(url)}/pay`)
    await expect.poll(() => stateOf(id), { timeout: 10_000 }).toBe('waiting')
  })

  it('gives one payment back when the same review was paid twice', async () => {
    const id = await ready()
    const first = await goToPay(id)
    // Another tab, after the first page was forgotten about: the order is made to look old so that a second page opens.
    arrange(world, database => database.prepare('update orders set checkout_expires_at_ms = ? where review_id = ?').run(Date.now() + 60_000, id))
    const second = await goToPay(id)
    expect(second).not.toBe(first)
    await fake(`/__fake__/sessions/${sessionOf(first)}/pay`)
    await fake(`/__fake__/sessions/${sessionOf(second)}/pay`)
    await expect.poll(() => stateOf(id), { timeout: 10_000 }).toBe('waiting')
    await expect.poll(() => arrange(world, database => database.prepare('select state, reason, amount_minor from refunds where order_id in (select id from orders where review_id = ?)').all(id)), { timeout: 10_000 })
      .toEqual([{ state: 'done', reason: 'paid-twice', amount_minor: 4500 }])
    await messagesTo(world, 'student2@demo.turfnote.test', mail => mail.subject.includes('goes back to your card'))
    expect(ledger().unbalanced).toEqual([])
  })

  it('gives a series as credits, one of them spent on the review', async () => {
    const id = await ready()
    const before = await creditsLeft()
    const url = await goToPay(id, seriesId)
    await fake(`/__fake__/sessions/${sessionOf(url)}/pay`)
    await expect.poll(() => stateOf(id), { timeout: 10_000 }).toBe('waiting')
    expect(await creditsLeft()).toBe(before + 4)
    const values = arrange(world, database => z.array(z.object({ value_minor: z.number() })).parse(database.prepare('select value_minor from credits where order_id = (select id from orders where review_id = ?)').all(id)))
    expect(values.reduce((sum, row) => sum + row.value_minor, 0)).toBe(19_500)
  })

  it('refuses a price that is no longer the one that was shown', async () => {
    const id = await ready()
    const answer = await call(world, 'POST', `/api/reviews/${id}/submit`, { as: 'student2', body: { payBy: 'card', offerId: singleId, priceMinor: 4400 } })
    expect(errorAnswer.parse(answer.body)).toMatchObject({ statusCode: 409, data: { code: 'price-changed' } })
    expect(await stateOf(id)).toBe('draft')
  })

  it('says that the provider is out of reach, keeps the draft, and goes on afterwards with one order', async () => {
    const id = await ready()
    await fake('/__fake__/fail', { match: '/v1/checkout/sessions', times: 20, status: 500 })
    const answer = await call(world, 'POST', `/api/reviews/${id}/submit`, { as: 'student2', body: { payBy: 'card', offerId: singleId } })
    expect(errorAnswer.parse(answer.body)).toMatchObject({ statusCode: 503, data: { code: 'provider-unavailable' } })
    expect(await stateOf(id)).toBe('draft')
    await fake('/__fake__/reset')
    await fake('/__fake__/webhook', { url: `${world.url}/webhooks/stripe` })
    await goToPay(id)
    expect(arrange(world, database => database.prepare('select count(*) as n from orders where review_id = ?').get(id))).toEqual({ n: 1 })
  })
})

describe('earning and giving back', () => {
  it('splits what an answer earned between coach and studio', async () => {
    const id = await ready()
    const url = await goToPay(id)
    await fake(`/__fake__/sessions/${sessionOf(url)}/pay`)
    await expect.poll(() => stateOf(id), { timeout: 10_000 }).toBe('waiting')
    const before = ledger().sums
    await call(world, 'POST', `/api/reviews/${id}/take-up`, { as: 'coach', body: {} })
    const version = await saveLetter(world, 'coach', id)
    expect((await call(world, 'POST', `/api/reviews/${id}/answer`, { as: 'coach', body: { version } })).status).toBe(200)
    const after = ledger()
    expect(after.unbalanced).toEqual([])
    expect((after.sums.coach ?? 0) - (before.coach ?? 0)).toBe(-2700)
    expect((after.sums.studio ?? 0) - (before.studio ?? 0)).toBe(-1800)
  })

  it('gives the money of a single review back when it is withdrawn before a coach took it up, and nothing afterwards', async () => {
    const id = await ready()
    const url = await goToPay(id)
    await fake(`/__fake__/sessions/${sessionOf(url)}/pay`)
    await expect.poll(() => stateOf(id), { timeout: 10_000 }).toBe('waiting')
    expect((await call(world, 'POST', `/api/reviews/${id}/withdraw`, { as: 'student2', body: {} })).body).toMatchObject({ state: 'withdrawn', turnaround: { status: 'stopped' } })
    await expect.poll(() => arrange(world, database => database.prepare('select state, reason from refunds where order_id in (select id from orders where review_id = ?)').all(id)), { timeout: 10_000 })
      .toEqual([{ state: 'done', reason: 'withdrawn' }])

    const late = await ready()
    const lateUrl = await goToPay(late)
    await fake(`/__fake__/sessions/${sessionOf(lateUrl)}/pay`)
    await expect.poll(() => stateOf(late), { timeout: 10_000 }).toBe('waiting')
    await call(world, 'POST', `/api/reviews/${late}/take-up`, { as: 'coach', body: {} })
    expect((await call(world, 'POST', `/api/reviews/${late}/withdraw`, { as: 'student2', body: {} })).status).toBe(200)
    expect(arrange(world, database => database.prepare('select count(*) as n from refunds where order_id in (select id from orders where review_id = ?)').get(late))).toEqual({ n: 0 })
  })

  it('gives a prepaid review back as one to use again', async () => {
    const id = await ready()
    const before = await creditsLeft()
    await call(world, 'POST', `/api/reviews/${id}/submit`, { as: 'student2', body: { payBy: 'credit' } })
    expect(await creditsLeft()).toBe(before - 1)
    await call(world, 'POST', `/api/reviews/${id}/withdraw`, { as: 'student2', body: {} })
    expect(await creditsLeft()).toBe(before)
  })
})

describe('events in any order', () => {
  it('delivered reversed, twice and eight at once end in one state with one receipt', async () => {
    await fake('/__fake__/hold', { on: true })
    const id = await ready()
    const url = await goToPay(id)
    await fake(`/__fake__/sessions/${sessionOf(url)}/pay`)
    const receiptsBefore = await receipts()
    for (const order of ['reversed', 'as-is'] as const) await fake('/__fake__/deliver', { times: 2, order, atOnce: true })
    await fake('/__fake__/hold', { on: false })
    expect(await stateOf(id)).toBe('waiting')
    expect(arrange(world, database => database.prepare('select state from orders where review_id = ?').all(id))).toEqual([{ state: 'paid' }])
    await expect.poll(receipts, { timeout: 10_000 }).toBe(receiptsBefore + 1)
    expect(ledger().unbalanced).toEqual([])
  })
})

async function receipts(): Promise<number> {
  return (await listMessages(world, 'student2@demo.turfnote.test')).filter(mail => mail.subject.startsWith('Receipt')).length
}

async function creditsLeft(): Promise<number> {
  return z.object({ creditsLeft: z.number() }).parse((await call(world, 'GET', '/api/account', { as: 'student2' })).body).creditsLeft
}
