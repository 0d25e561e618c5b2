import { describe, expect, it } from 'vitest'
import { workingToday } from '#shared/domain/turnaround/today'
import { HOUR_MS, always, at, span, weekdays } from './sample-calendars'

describe('workingToday', () => {
  const tokyo = weekdays('Asia/Tokyo', 9, 17)
  it('is about the date in the zone of the hours', () => {
    // 23:30Z on Monday is Tuesday 08:30 in Tokyo.
    expect(workingToday(tokyo, at('2026-05-11T23:30Z')))
      .toEqual({ opensAtMs: at('2026-05-12T00:00Z'), closesAtMs: at('2026-05-12T08:00Z'), leftMs: 8 * HOUR_MS })
  })
  it('counts what is left, down to nothing after closing', () => {
    expect(workingToday(tokyo, at('2026-05-12T06:00Z'))?.leftMs).toBe(2 * HOUR_MS)
    expect(workingToday(tokyo, at('2026-05-12T10:00Z'))).toEqual({ opensAtMs: at('2026-05-12T00:00Z'), closesAtMs: at('2026-05-12T08:00Z'), leftMs: 0 })
  })
  it('is null on a date without working time', () => {
    expect(workingToday(tokyo, at('2026-05-16T03:00Z'))).toBeNull()
    expect(workingToday(weekdays('Asia/Tokyo', 9, 17, [span('2026-05-11T00:00Z', '2026-05-13T00:00Z')]), at('2026-05-12T03:00Z'))).toBeNull()
  })
  it('knows short and long days', () => {
    expect(workingToday(always('Europe/London'), at('2026-03-29T00:00Z'))?.leftMs).toBe(23 * HOUR_MS)
    expect(workingToday(always('Europe/London'), at('2026-10-24T23:00Z'))?.leftMs).toBe(25 * HOUR_MS)
  })
  it('leaves out a span taken off in the middle', () => {
    const calendar = weekdays('UTC', 9, 17, [span('2026-05-12T12:00Z', '2026-05-12T13:00Z')])
    expect(workingToday(calendar, at('2026-05-12T11:00Z'))?.leftMs).toBe(5 * HOUR_MS)
  })
})
