import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import type { TurnaroundEvent } from '#shared/domain/turnaround/events'
import { pauseTurnaround, resumeTurnaround, startTurnaround, stopTurnaround } from '#shared/domain/turnaround/moves'
import { applyTurnaroundEvent, isLateAt, replayTurnaround, usedMsAt } from '#shared/domain/turnaround/replay'
import { minuteOracle } from './minute-oracle'
import { HOUR_MS, at, weekdays } from './sample-calendars'

const mara = weekdays('UTC', 9, 17)
const calendars = new Map([['mara-1', mara], ['mara-2', weekdays('UTC', 9, 10)]])
const event = (kind: TurnaroundEvent['kind'], when: string, promised: string, calendarVersionId = 'mara-1'): TurnaroundEvent =>
  ({ kind, atMs: at(when), calendarVersionId, promisedAtMs: at(promised) })

const story = [
  event('started', '2026-05-12T10:00Z', '2026-05-13T11:00Z'),
  event('paused', '2026-05-12T15:00Z', '2026-05-13T11:00Z'),
  event('resumed', '2026-05-14T10:00Z', '2026-05-14T14:00Z'),
  event('missed', '2026-05-14T14:01Z', '2026-05-14T14:00Z'),
  event('coach-changed', '2026-05-14T14:02Z', '2026-05-14T14:00Z'),
  event('stopped', '2026-05-14T15:00Z', '2026-05-14T14:00Z'),
]

describe('replayTurnaround', () => {
  it('arrives at the present promise', () => {
    expect(replayTurnaround(story, calendars)).toEqual({
      ok: true,
      state: {
        status: 'stopped',
        startedAtMs: at('2026-05-12T10:00Z'),
        calendarVersionId: 'mara-1',
        promisedAtMs: at('2026-05-14T14:00Z'),
        allowedMs: 9 * HOUR_MS,
        usedMs: 10 * HOUR_MS,
        asOfMs: at('2026-05-14T15:00Z'),
        ranUntilMs: at('2026-05-14T15:00Z'),
        pauses: [{ fromMs: at('2026-05-12T15:00Z'), toMs: at('2026-05-14T10:00Z') }],
        stoppedAtMs: at('2026-05-14T15:00Z'),
        missedAtMs: at('2026-05-14T14:01Z'),
      },
    })
  })
  it('is the same whatever calendars came later', () => {
    const more = new Map([...calendars, ['mara-3', { ...mara, weekly: [] }]])
    expect(replayTurnaround(story, more)).toEqual(replayTurnaround(story, new Map([['mara-1', mara]])))
  })
  it('names the first event that does not fit', () => {
    const swap = (index: number, change: Partial<TurnaroundEvent>) => story.map((one, place) => place === index ? { ...one, ...change } : one)
    expect(replayTurnaround([], calendars)).toEqual({ ok: false, reason: 'no-events', eventIndex: 0 })
    expect(replayTurnaround(story.slice(1), calendars)).toEqual({ ok: false, reason: 'not-started', eventIndex: 0 })
    expect(replayTurnaround([...story.slice(0, 2), ...story], calendars)).toEqual({ ok: false, reason: 'already-started', eventIndex: 2 })
    expect(replayTurnaround([...story, ...story.slice(1, 2)], calendars)).toEqual({ ok: false, reason: 'already-stopped', eventIndex: 6 })
    expect(replayTurnaround(swap(1, { promisedAtMs: 1 }), calendars)).toEqual({ ok: false, reason: 'promise-differs', eventIndex: 1 })
    expect(replayTurnaround(swap(2, { promisedAtMs: at('2026-05-14T14:01Z') }), calendars)).toEqual({ ok: false, reason: 'promise-differs', eventIndex: 2 })
    expect(replayTurnaround(swap(1, { calendarVersionId: 'mara-2' }), calendars)).toEqual({ ok: false, reason: 'calendar-differs', eventIndex: 1 })
    expect(replayTurnaround(swap(2, { atMs: 0 }), calendars)).toEqual({ ok: false, reason: 'out-of-order', eventIndex: 2 })
    expect(replayTurnaround(story, new Map())).toEqual({ ok: false, reason: 'unknown-calendar', eventIndex: 0 })
  })
  it('does not change the state it is given', () => {
    const first = applyTurnaroundEvent(null, event('started', '2026-05-12T10:00Z', '2026-05-13T11:00Z'), calendars)
    if (!first.ok) throw new Error(first.reason)
    const before = structuredClone(first.state)
    applyTurnaroundEvent(Object.freeze(first.state), event('paused', '2026-05-12T15:00Z', '2026-05-13T11:00Z'), calendars)
    expect(first.state).toEqual(before)
  })
})

describe('usedMsAt and isLateAt', () => {
  const stateAfter = (count: number) => {
    const replayed = replayTurnaround(story.slice(0, count), calendars)
    if (!replayed.ok) throw new Error(replayed.reason)
    return replayed.state
  }
  it('count while the clock runs only', () => {
    expect(usedMsAt(stateAfter(1), calendars, at('2026-05-12T13:00Z'))).toBe(3 * HOUR_MS)
    expect(usedMsAt(stateAfter(1), calendars, at('2026-05-12T09:00Z'))).toBe(0)
    expect(usedMsAt(stateAfter(2), calendars, at('2026-05-20T13:00Z'))).toBe(5 * HOUR_MS)
    expect(usedMsAt(stateAfter(6), calendars, at('2026-05-20T13:00Z'))).toBe(10 * HOUR_MS)
    expect(usedMsAt(stateAfter(1), new Map(), at('2026-05-12T13:00Z'))).toBeNull()
  })
  it('judge a clock by when it last ran', () => {
    expect(isLateAt(stateAfter(1), at('2026-05-13T11:00Z'))).toBe(false)
    expect(isLateAt(stateAfter(1), at('2026-05-13T11:00Z') + 1)).toBe(true)
    expect(isLateAt(stateAfter(2), at('2027-01-01T00:00Z'))).toBe(false)
    expect(isLateAt(stateAfter(6), at('2026-05-12T11:00Z'))).toBe(true)
  })
})

describe('random pauses against a table of minutes', () => {
  const MINUTE_MS = 60_000
  const TABLE_DAYS = 40
  const originMs = at('2026-03-01T00:00Z')
  const scene = fc.record({
    startMinute: fc.integer({ min: 2 * 1440, max: 8 * 1440 }),
    turnaroundMinutes: fc.integer({ min: 1, max: 1500 }),
    pauses: fc.array(fc.record({ runMinutes: fc.integer({ min: 0, max: 1500 }), stoodMinutes: fc.integer({ min: 0, max: 2500 }) }), { maxLength: 4 }),
    fromHour: fc.integer({ min: 0, max: 9 }),
    hours: fc.integer({ min: 3, max: 12 }),
  })

  it.each(['America/New_York', 'Europe/London', 'Australia/Lord_Howe', 'Asia/Kolkata'])('%s', (timeZone) => {
    let pausesSeen = 0
    fc.assert(fc.property(scene, (made) => {
      const calendar = weekdays(timeZone, made.fromHour, made.fromHour + made.hours)
      const known = new Map([['v', calendar]])
      const events: TurnaroundEvent[] = []
      const written = (outcome: ReturnType<typeof startTurnaround>) => {
        if (!outcome.ok) throw new Error(outcome.reason)
        events.push(outcome.event)
        return outcome.state
      }
      const startMs = originMs + made.startMinute * MINUTE_MS
      let state = written(startTurnaround({ atMs: startMs, calendarVersionId: 'v', turnaroundMs: made.turnaroundMinutes * MINUTE_MS }, known))
      let nowMs = startMs
      for (const { runMinutes, stoodMinutes } of made.pauses) {
        nowMs += runMinutes * MINUTE_MS
        if (nowMs >= state.promisedAtMs) break
        state = written(pauseTurnaround(state, nowMs, known))
        nowMs += stoodMinutes * MINUTE_MS
        state = written(resumeTurnaround(state, nowMs, known))
        pausesSeen += 1
      }
      // Told independently: minutes of a pause are no working minutes, so the promise is where the rest adds up.
      const stood: WorkingCalendar['timeOff'] = state.pauses.map(pause => ({ fromMs: pause.fromMs, toMs: pause.toMs ?? 0 }))
      const oracle = minuteOracle({ ...calendar, timeOff: stood }, originMs, TABLE_DAYS * 1440)
      expect(state.promisedAtMs).toBe(oracle.add(startMs, made.turnaroundMinutes * MINUTE_MS))
      expect(state.usedMs).toBe(oracle.between(startMs, state.asOfMs))
      state = written(stopTurnaround(state, state.promisedAtMs, known))
      expect(state.usedMs).toBe(made.turnaroundMinutes * MINUTE_MS)
      expect(replayTurnaround(events, known)).toEqual({ ok: true, state })
    }), { seed: 20260308, numRuns: 40 })
    expect(pausesSeen).toBeGreaterThan(20)
  })
})
