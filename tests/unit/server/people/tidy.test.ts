import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { changeAccount } from '#server/features/people/account.service'
import { tidyPeople } from '#server/features/people/people.jobs'
import { issueToken } from '#server/features/people/token.service'
import { getViewer } from '#server/features/people/viewer.service'
import { insertSession } from '#server/features/sessions/session.repository'
import { newId } from '#server/ids'
import type { House } from './open-house'
import { DAY_MS, NOW_MS, openHouse } from './open-house'

let house: House
let joelId: string

beforeEach(async () => {
  house = await openHouse()
  joelId = await house.addPerson({ email: 'joel@northfield.test' })
})
afterEach(() => house.close())

describe('tidying', () => {
  it('clears what has run out at this moment, and nothing that still holds', async () => {
    const sessions = [newId(NOW_MS), newId(NOW_MS)]
    await insertSession(house.db, { id: sessions[0] ?? '', userId: joelId, nowMs: NOW_MS - DAY_MS, expiresAtMs: NOW_MS })
    await insertSession(house.db, { id: sessions[1] ?? '', userId: joelId, nowMs: NOW_MS - DAY_MS, expiresAtMs: NOW_MS + 1 })
    await issueToken(house.db, NOW_MS - DAY_MS, { userId: joelId, purpose: 'confirm', lastsMs: DAY_MS })
    const token = await issueToken(house.db, NOW_MS - DAY_MS, { userId: joelId, purpose: 'confirm', lastsMs: DAY_MS + 1 })
    const key = (name: string, createdAtMs: number) => ({ scope: 'visitor', key: name, request_hash: 'x', answer: 'null', created_at_ms: createdAtMs })
    await house.db.insertInto('idempotency_keys').values([key('old', NOW_MS - 30 * DAY_MS - 1), key('kept', NOW_MS - 30 * DAY_MS)]).execute()

    await tidyPeople(await house.ctx())
    expect(await house.db.selectFrom('sessions').select('id').execute()).toEqual([{ id: sessions[1] }])
    expect(await house.db.selectFrom('tokens').select('id').execute()).toEqual([{ id: token.id }])
    expect(await house.db.selectFrom('idempotency_keys').select('key').execute()).toEqual([{ key: 'kept' }])
  })

  it('clears more than one batch in a run', async () => {
    const rows = Array.from({ length: 1201 }, (_, index) => ({ scope: 'visitor', key: `key-${index}`, request_hash: 'x', answer: 'null', created_at_ms: 0 }))
    for (let from = 0; from < rows.length; from += 400) await house.db.insertInto('idempotency_keys').values(rows.slice(from, from + 400)).execute()
    await tidyPeople(await house.ctx())
    expect(await house.db.selectFrom('idempotency_keys').select('key').execute()).toEqual([])
  })
})

describe('one\'s own account', () => {
  it('changes what was given and leaves the rest', async () => {
    const ctx = await house.signedInCtx(joelId)
    expect(await changeAccount(ctx, { timeZone: 'Asia/Tokyo' })).toMatchObject({ name: 'Joel Okafor', timeZone: 'Asia/Tokyo' })
    expect(await changeAccount(ctx, { name: 'Joel O.' })).toMatchObject({ name: 'Joel O.', timeZone: 'Asia/Tokyo' })
    expect(await changeAccount(ctx, {})).toMatchObject({ name: 'Joel O.', timeZone: 'Asia/Tokyo' })
  })

  it('tells how many paid reviews are left, spent ones and other people\'s not counted', async () => {
    const other = await house.addPerson({ email: 'other@northfield.test' })
    await house.db.insertInto('offers').values({ id: 'offer', kind: 'series' }).execute()
    await house.db.insertInto('offer_versions').values({
      id: 'version', offer_id: 'offer', version: 1, name: 'Three', review_count: 3, price_minor: 100, currency: 'EUR', turnaround_ms: 1,
      follow_ups_included: 0, created_at_ms: 0,
    }).execute()
    const credit = (id: string, studentId: string, isSpent: boolean) => ({
      id, student_id: studentId, offer_version_id: 'version', granted_at_ms: 0, spent_at_ms: isSpent ? 1 : null, spent_review_id: isSpent ? id : null,
    })
    await house.db.insertInto('credits').values([
      credit('a', joelId, false), credit('b', joelId, false), credit('c', joelId, true), credit('d', other, false),
    ]).execute()
    expect((await getViewer(house.db, joelId)).creditsLeft).toBe(2)
  })

  it('is not there for who is not', async () => {
    await expect(getViewer(house.db, newId(NOW_MS))).rejects.toThrow('no user')
  })
})
