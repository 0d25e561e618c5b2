import { describe, expect, it } from 'vitest'
import { pauseTurnaround, resumeTurnaround, startTurnaround, stopTurnaround } from '#shared/domain/turnaround/moves'
import type { MoveOutcome } from '#shared/domain/turnaround/moves'
import { warningMoments, warningMomentsOf } from '#shared/domain/turnaround/warnings'
import { HOUR_MS, at, weekdays } from './sample-calendars'

const calendar = weekdays('UTC', 9, 17)
const calendars = new Map([['v', calendar]])
const runningSinceMs = at('2026-05-12T10:00Z')
const promisedAtMs = at('2026-05-13T12:00Z') // ten working hours

describe('warningMoments', () => {
  it('gives the moments at which half and a fifth are left', () => {
    expect(warningMoments({ calendar, runningSinceMs, promisedAtMs, allowedMs: 10 * HOUR_MS }))
      .toEqual({ halfAtMs: at('2026-05-12T15:00Z'), fifthAtMs: at('2026-05-13T10:00Z') })
  })
  it('leaves out a share that was passed before the clock ran again', () => {
    expect(warningMoments({ calendar, runningSinceMs: at('2026-05-12T16:00Z'), promisedAtMs, allowedMs: 10 * HOUR_MS }))
      .toEqual({ halfAtMs: null, fifthAtMs: at('2026-05-13T10:00Z') })
    expect(warningMoments({ calendar, runningSinceMs: at('2026-05-13T11:00Z'), promisedAtMs, allowedMs: 10 * HOUR_MS }))
      .toEqual({ halfAtMs: null, fifthAtMs: null })
  })
  it('takes the very moment when exactly the share is left', () => {
    expect(warningMoments({ calendar, runningSinceMs: at('2026-05-12T15:00Z'), promisedAtMs, allowedMs: 10 * HOUR_MS }).halfAtMs).toBe(at('2026-05-12T15:00Z'))
  })
  it('has nothing to say without time left', () => {
    const none = { halfAtMs: null, fifthAtMs: null }
    expect(warningMoments({ calendar, runningSinceMs, promisedAtMs, allowedMs: 0 })).toEqual(none)
    expect(warningMoments({ calendar, runningSinceMs: promisedAtMs + 1, promisedAtMs, allowedMs: HOUR_MS })).toEqual(none)
    expect(warningMoments({ calendar: { ...calendar, weekly: [] }, runningSinceMs, promisedAtMs, allowedMs: HOUR_MS })).toEqual(none)
  })
})

describe('warningMomentsOf', () => {
  const stateOf = (outcome: MoveOutcome) => {
    if (!outcome.ok) throw new Error(outcome.reason)
    return outcome.state
  }
  const running = stateOf(startTurnaround({ atMs: runningSinceMs, calendarVersionId: 'v', turnaroundMs: 10 * HOUR_MS }, calendars))
  const paused = stateOf(pauseTurnaround(running, at('2026-05-12T14:00Z'), calendars))
  it('counts from the start', () => {
    expect(warningMomentsOf(running, calendars)).toEqual({ halfAtMs: at('2026-05-12T15:00Z'), fifthAtMs: at('2026-05-13T10:00Z') })
  })
  it('moves with the promise over a pause', () => {
    // Paused for a working day; four of ten hours were used.
    const resumed = stateOf(resumeTurnaround(paused, at('2026-05-13T14:00Z'), calendars))
    expect(warningMomentsOf(resumed, calendars)).toEqual({ halfAtMs: at('2026-05-13T15:00Z'), fifthAtMs: at('2026-05-14T10:00Z') })
  })
  it('is silent while the clock stands still, after the stop and without the calendar', () => {
    const none = { halfAtMs: null, fifthAtMs: null }
    expect(warningMomentsOf(paused, calendars)).toEqual(none)
    expect(warningMomentsOf(stateOf(stopTurnaround(running, at('2026-05-12T14:00Z'), calendars)), calendars)).toEqual(none)
    expect(warningMomentsOf(running, new Map())).toEqual(none)
  })
})
