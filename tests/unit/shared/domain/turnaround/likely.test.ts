import { describe, expect, it } from 'vitest'
import { inOrderOfPromise, likelyAt, queueFinishes } from '#shared/domain/turnaround/likely'
import { HOUR_MS, at, weekdays } from './sample-calendars'

const calendar = weekdays('UTC', 9, 17)
const nowMs = at('2026-05-12T15:00Z')
const work = (promised: string, hours = 1, isInHand = false) => ({ promisedAtMs: at(promised), workMs: hours * HOUR_MS, isInHand })

describe('likelyAt', () => {
  const promisedAtMs = at('2026-05-13T15:00Z')
  it('is the review\'s own time when nothing waits', () => {
    expect(likelyAt({ calendar, nowMs, queue: [], promisedAtMs, workMs: HOUR_MS })).toEqual({ ok: true, likelyAtMs: at('2026-05-12T16:00Z'), isInTime: true })
  })
  it('waits for what is promised before it or at the same moment, and for what is in hand', () => {
    const queue = [work('2026-05-13T12:00Z'), work('2026-05-13T15:00Z', 2), work('2026-05-13T15:01Z', 5), work('2026-05-20T15:00Z', 0.5, true)]
    expect(likelyAt({ calendar, nowMs, queue, promisedAtMs, workMs: HOUR_MS })).toEqual({ ok: true, likelyAtMs: at('2026-05-13T11:30Z'), isInTime: true })
  })
  it('says when the promise could not be kept, to the millisecond', () => {
    const queue = [work('2026-05-13T12:00Z', 7)]
    expect(likelyAt({ calendar, nowMs, queue, promisedAtMs, workMs: HOUR_MS })).toMatchObject({ likelyAtMs: promisedAtMs, isInTime: true })
    expect(likelyAt({ calendar, nowMs, queue, promisedAtMs, workMs: HOUR_MS + 0.5 })).toMatchObject({ likelyAtMs: promisedAtMs + 1, isInTime: false })
  })
  it('names hours that never come and work that is no duration', () => {
    expect(likelyAt({ calendar: { ...calendar, weekly: [] }, nowMs, queue: [], promisedAtMs, workMs: 1 })).toEqual({ ok: false, reason: 'no-working-time' })
    expect(likelyAt({ calendar, nowMs, queue: [], promisedAtMs, workMs: Number.NaN })).toEqual({ ok: false, reason: 'not-a-duration' })
  })
})

describe('inOrderOfPromise and queueFinishes', () => {
  it('put work in hand first, then promises, equal ones as given', () => {
    const queue = [work('2026-05-14T09:00Z', 1), work('2026-05-13T09:00Z', 2), work('2026-05-14T09:00Z', 3), work('2026-06-01T09:00Z', 4, true)]
    expect(inOrderOfPromise(queue).map(one => one.workMs / HOUR_MS)).toEqual([4, 2, 1, 3])
    expect(queue[0]?.workMs).toBe(HOUR_MS)
  })
  it('finish one after another through the hours', () => {
    const finishes = queueFinishes(calendar, nowMs, [work('2026-05-14T09:00Z', 3), work('2026-05-13T09:00Z', 1)])
    expect(finishes.map(one => one.finishAtMs)).toEqual([at('2026-05-12T16:00Z'), at('2026-05-13T11:00Z')])
  })
  it('end with null where the horizon ends, and for nothing with nothing', () => {
    const finishes = queueFinishes(calendar, nowMs, [work('2026-05-13T09:00Z', 1), work('2026-05-14T09:00Z', 1e4), work('2026-05-15T09:00Z', 1)])
    expect(finishes.map(one => one.finishAtMs)).toEqual([at('2026-05-12T16:00Z'), null, null])
    expect(queueFinishes(calendar, nowMs, [])).toEqual([])
  })
  it('agree with likelyAt for the last of the queue', () => {
    const queue = [work('2026-05-14T09:00Z', 3), work('2026-05-13T09:00Z', 1), work('2026-05-15T09:00Z', 6)]
    const mine = work('2026-05-16T09:00Z', 2)
    expect(likelyAt({ calendar, nowMs, queue, ...mine })).toMatchObject({ likelyAtMs: queueFinishes(calendar, nowMs, [...queue, mine]).at(-1)?.finishAtMs })
  })
})
