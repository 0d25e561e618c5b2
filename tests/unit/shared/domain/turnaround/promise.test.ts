import { describe, expect, it } from 'vitest'
import { QUOTE_HOLDS_MS, isQuoteHeld, promiseAfterPause, promiseFor } from '#shared/domain/turnaround/promise'
import { HOUR_MS, at, span, weekdays } from './sample-calendars'

const calendar = weekdays('UTC', 9, 17)

describe('promiseFor', () => {
  const startMs = at('2026-05-12T15:00Z')
  it('adds the turnaround in working time', () => {
    expect(promiseFor({ calendar, startMs, turnaroundMs: 9 * HOUR_MS })).toEqual({ ok: true, atMs: at('2026-05-13T16:00Z') })
  })
  it('is due at once when the turnaround is zero', () => {
    expect(promiseFor({ calendar, startMs, turnaroundMs: 0 })).toEqual({ ok: true, atMs: startMs })
  })
  it('keeps a quote that holds and forgets one that does not', () => {
    const promisedAtMs = at('2026-05-13T15:45Z')
    const held = { promisedAtMs, quotedAtMs: startMs - QUOTE_HOLDS_MS + 1 }
    const stale = { promisedAtMs, quotedAtMs: startMs - QUOTE_HOLDS_MS }
    const later = { promisedAtMs, quotedAtMs: startMs + 1 }
    expect(promiseFor({ calendar, startMs, turnaroundMs: 9 * HOUR_MS, quote: held })).toEqual({ ok: true, atMs: promisedAtMs })
    expect(promiseFor({ calendar, startMs, turnaroundMs: 9 * HOUR_MS, quote: stale })).toEqual({ ok: true, atMs: at('2026-05-13T16:00Z') })
    expect(promiseFor({ calendar, startMs, turnaroundMs: 9 * HOUR_MS, quote: later })).toEqual({ ok: true, atMs: at('2026-05-13T16:00Z') })
    expect(isQuoteHeld(held, startMs)).toBe(true)
  })
  it('names a calendar that never works', () => {
    expect(promiseFor({ calendar: { ...calendar, weekly: [] }, startMs, turnaroundMs: 1 })).toEqual({ ok: false, reason: 'no-working-time' })
  })
})

describe('promiseAfterPause', () => {
  const promisedAtMs = at('2026-05-13T12:00Z')
  it.each([
    ['within a day', span('2026-05-12T10:00Z', '2026-05-12T12:00Z'), '2026-05-13T14:00Z'],
    ['over a night', span('2026-05-12T16:00Z', '2026-05-13T10:00Z'), '2026-05-13T14:00Z'],
    ['past the promise', span('2026-05-13T11:00Z', '2026-05-14T11:00Z'), '2026-05-14T12:00Z'],
    ['at night alone', span('2026-05-12T20:00Z', '2026-05-13T04:00Z'), '2026-05-13T12:00Z'],
    ['from the promise on', span('2026-05-13T12:00Z', '2026-05-13T14:00Z'), '2026-05-13T14:00Z'],
    ['from after the promise', { fromMs: promisedAtMs + 1, toMs: promisedAtMs + HOUR_MS }, '2026-05-13T12:00Z'],
    ['of no length', span('2026-05-12T10:00Z', '2026-05-12T10:00Z'), '2026-05-13T12:00Z'],
    ['of two years', span('2026-05-13T12:00Z', '2028-05-17T12:00Z'), '2028-05-17T12:00Z'],
  ])('moves by a pause %s', (_, pause, expected) => {
    expect(promiseAfterPause(calendar, promisedAtMs, pause)).toEqual({ ok: true, atMs: at(expected) })
  })
})
