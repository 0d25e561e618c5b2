import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addWorkingMs } from '#shared/domain/turnaround/adding'
import { workingMsBetween } from '#shared/domain/turnaround/between'
import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import { workingSpans } from '#shared/domain/turnaround/spans'
import { minuteOracle } from './minute-oracle'
import { at, once } from './sample-calendars'

const MINUTE_MS = 60_000
const DAY_MS = 86_400_000
const TABLE_DAYS = 16
/** Hours of a date reach two UTC days at most, so what lies this far inside the table does not depend on its ends. */
const MARGIN_DAYS = 2

/** Shifts of an hour and of half an hour, at night, at midnight and in the small hours, north and south, odd offsets, none. */
const ZONES = [
  'America/New_York', 'Europe/London', 'Australia/Lord_Howe', 'Pacific/Chatham', 'America/St_Johns', 'America/Havana',
  'America/Santiago', 'Atlantic/Azores', 'Asia/Kathmandu', 'America/Phoenix', 'Pacific/Apia', 'UTC',
]

/** Days from 2025 to 2035 within which the zone's clocks change; year ends and leap days where they never do. */
function daysOfChange(timeZone: string): number[] {
  const format = new Intl.DateTimeFormat('en-US', { timeZone, hourCycle: 'h23', hour: 'numeric', minute: 'numeric' })
  const days: number[] = []
  for (let dayMs = at('2025-01-01T00:00Z'); dayMs < at('2036-01-01T00:00Z'); dayMs += DAY_MS) {
    if (format.format(dayMs) !== format.format(dayMs + DAY_MS)) days.push(dayMs)
  }
  return days.length > 0 ? days : [at('2025-12-31T00:00Z'), at('2028-02-29T00:00Z'), at('2032-02-29T00:00Z')]
}

/** Many at and around the hours at which clocks change, and many that are odd. */
const minuteOfDay = fc.oneof(fc.integer({ min: 0, max: 210 }), fc.constantFrom(0, 30, 60, 90, 105, 120, 150, 180, 1410, 1440), fc.integer({ min: 0, max: 1440 }))
const weekday = fc.oneof(fc.constantFrom(6, 7, 7), fc.integer({ min: 1, max: 7 }))
const weekly = fc.array(fc.record({ weekday, one: minuteOfDay, other: minuteOfDay }), { maxLength: 8 })
  .map(list => list.map(({ weekday, one, other }) => ({ weekday, fromMinute: Math.min(one, other), toMinute: Math.max(one, other) })))
const withinTable = fc.oneof(fc.constantFrom(0, 12 * DAY_MS), fc.integer({ min: 0, max: 12 * DAY_MS }))

const scene = fc.record({
  change: fc.nat(),
  daysBefore: fc.integer({ min: MARGIN_DAYS + 1, max: 12 }),
  weekly,
  off: fc.array(fc.record({ atMinute: fc.integer({ min: 0, max: TABLE_DAYS * 1440 }), minutes: fc.integer({ min: 1, max: 3000 }) }), { maxLength: 3 }),
  fromMs: withinTable,
  toMs: withinTable,
  addMs: fc.integer({ min: 0, max: 3 * DAY_MS }),
})

function sceneOf(timeZone: string, changes: number[], made: typeof scene extends fc.Arbitrary<infer Made> ? Made : never) {
  const originMs = (changes[made.change % changes.length] ?? Number.NaN) - made.daysBefore * DAY_MS
  const calendar: WorkingCalendar = {
    timeZone,
    weekly: made.weekly,
    timeOff: made.off.map(({ atMinute, minutes }) => {
      const fromMs = originMs + atMinute * MINUTE_MS
      return { fromMs, toMs: fromMs + minutes * MINUTE_MS }
    }),
  }
  const startMs = originMs + MARGIN_DAYS * DAY_MS
  return {
    calendar,
    oracle: minuteOracle(calendar, originMs, TABLE_DAYS * 1440),
    endMs: startMs + 12 * DAY_MS,
    fromMs: startMs + Math.min(made.fromMs, made.toMs),
    toMs: startMs + Math.max(made.fromMs, made.toMs),
  }
}

describe('working time against a table of minutes', () => {
  it.each(ZONES)('%s: spans, measuring and adding', (timeZone) => {
    const changes = daysOfChange(timeZone)
    fc.assert(fc.property(scene, (made) => {
      const { calendar, oracle, endMs, fromMs, toMs } = sceneOf(timeZone, changes, made)
      expect(workingMsBetween(calendar, fromMs, toMs)).toBe(oracle.between(fromMs, toMs))
      const spans = workingSpans(calendar, fromMs, toMs)
      for (const [index, span] of spans.entries()) {
        expect(span.fromMs).toBeLessThan(span.toMs)
        expect(span.fromMs).toBeGreaterThan(spans[index - 1]?.toMs ?? fromMs - 1)
        expect(oracle.isWorking(span.fromMs) && oracle.isWorking(span.toMs - 1)).toBe(true)
        if (span.fromMs > fromMs) expect(oracle.isWorking(span.fromMs - 1)).toBe(false)
        if (span.toMs < toMs) expect(oracle.isWorking(span.toMs)).toBe(false)
      }
      const added = addWorkingMs(calendar, fromMs, made.addMs)
      const expected = oracle.add(fromMs, made.addMs)
      // The table knows nothing of what lies beyond its sure part.
      if (expected !== undefined && expected <= endMs) expect(added).toEqual({ ok: true, atMs: expected })
      else if (added.ok) expect(added.atMs).toBeGreaterThan(endMs)
    }), { seed: 20260512, numRuns: 50 })
  })

  it('would notice hours that are a minute off', () => {
    const calendar = once('Australia/Lord_Howe', 7, 60, 200)
    const originMs = at('2026-04-01T00:00Z')
    const oracle = minuteOracle(calendar, originMs, TABLE_DAYS * 1440)
    const wrong = once('Australia/Lord_Howe', 7, 60, 201)
    expect(workingMsBetween(wrong, originMs, originMs + 10 * DAY_MS)).not.toBe(oracle.between(originMs, originMs + 10 * DAY_MS))
  })

  it('holds changes of the clock in its scenes', () => {
    // Lord Howe goes back half an hour on 2026-04-05 at 02:00 (+11), so 01:00 to 03:00 lasts two and a half hours.
    const calendar = once('Australia/Lord_Howe', 7, 60, 180)
    const oracle = minuteOracle(calendar, at('2026-04-03T00:00Z'), 4 * 1440)
    expect(oracle.between(at('2026-04-03T00:00Z'), at('2026-04-07T00:00Z'))).toBe(150 * MINUTE_MS)
  })
})
