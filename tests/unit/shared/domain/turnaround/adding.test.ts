import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { HORIZON_MS, addWorkingMs } from '#shared/domain/turnaround/adding'
import { workingMsBetween } from '#shared/domain/turnaround/between'
import { HOUR_MS, always, at, once, span, weekdays } from './sample-calendars'

const london = weekdays('Europe/London', 9, 17)
const ends = (text: string) => ({ ok: true, atMs: at(text) })

describe('addWorkingMs', () => {
  it('ends a full day at its close, not at the next opening', () => {
    expect(addWorkingMs(london, at('2026-05-12T08:00Z'), 8 * HOUR_MS)).toEqual(ends('2026-05-12T16:00Z'))
    expect(addWorkingMs(london, at('2026-05-12T08:00Z'), 8 * HOUR_MS + 1)).toEqual({ ok: true, atMs: at('2026-05-13T08:00Z') + 1 })
  })
  it('goes over the weekend and the change of the clock', () => {
    expect(addWorkingMs(london, at('2026-03-27T16:00Z'), 2 * HOUR_MS)).toEqual(ends('2026-03-30T09:00Z'))
  })
  it('goes over a long holiday', () => {
    const calendar = weekdays('UTC', 9, 17, [span('2026-05-12T00:00Z', '2026-11-02T00:00Z')])
    expect(addWorkingMs(calendar, at('2026-05-12T12:00Z'), HOUR_MS)).toEqual(ends('2026-11-02T10:00Z'))
  })
  it('adds zero where it stands, working hour or not', () => {
    expect(addWorkingMs(london, at('2026-05-16T03:00Z'), 0)).toEqual(ends('2026-05-16T03:00Z'))
    expect(addWorkingMs({ ...london, weekly: [] }, 7, 0)).toEqual({ ok: true, atMs: 7 })
  })
  it('ends when there is no working time', () => {
    const startMs = at('2026-05-12T00:00Z')
    expect(addWorkingMs({ ...london, weekly: [] }, startMs, 1)).toEqual({ ok: false, reason: 'no-working-time' })
    expect(addWorkingMs({ ...london, timeOff: [{ fromMs: startMs, toMs: startMs + HORIZON_MS }] }, startMs, 1)).toEqual({ ok: false, reason: 'no-working-time' })
    expect(addWorkingMs(once('UTC', 1, 0, 1), startMs, 59 * 60_000)).toEqual({ ok: false, reason: 'no-working-time' })
  })
  it('looks exactly as far as the horizon', () => {
    const startMs = at('2026-05-12T00:00Z')
    expect(addWorkingMs(always('UTC'), startMs, HORIZON_MS)).toEqual({ ok: true, atMs: startMs + HORIZON_MS })
    expect(addWorkingMs(always('UTC'), startMs, HORIZON_MS + 1)).toEqual({ ok: false, reason: 'no-working-time' })
    expect(addWorkingMs(always('UTC'), startMs, HOUR_MS, HOUR_MS - 1)).toEqual({ ok: false, reason: 'no-working-time' })
  })
  it.each([-1, 0.5, Number.NaN, Number.POSITIVE_INFINITY])('refuses %s', (ms) => {
    expect(addWorkingMs(london, 0, ms)).toEqual({ ok: false, reason: 'not-a-duration' })
  })
  it('agrees with measuring', () => {
    const startMs = fc.integer({ min: at('2026-01-01T00:00Z'), max: at('2026-12-31T00:00Z') })
    fc.assert(fc.property(startMs, fc.integer({ min: 0, max: 400 * HOUR_MS }), (start, ms) => {
      const added = addWorkingMs(london, start, ms)
      expect(added.ok).toBe(true)
      if (!added.ok) return
      expect(workingMsBetween(london, start, added.atMs)).toBe(ms)
      if (ms > 0) expect(workingMsBetween(london, start, added.atMs - 1)).toBe(ms - 1)
    }), { seed: 5, numRuns: 60 })
  })
})
