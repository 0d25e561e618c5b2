import { describe, expect, it } from 'vitest'
import { clippedSpans, mergedSpans, workingSpans } from '#shared/domain/turnaround/spans'
import { HOUR_MS, always, at, once, span, weekdays } from './sample-calendars'

const london = weekdays('Europe/London', 9, 17)

describe('workingSpans', () => {
  it('gives the hours of each day, cut at both ends', () => {
    // British Summer Time: nine o'clock is 08:00Z.
    expect(workingSpans(london, at('2026-05-12T10:00Z'), at('2026-05-14T09:00Z'))).toEqual([
      span('2026-05-12T10:00Z', '2026-05-12T16:00Z'),
      span('2026-05-13T08:00Z', '2026-05-13T16:00Z'),
      span('2026-05-14T08:00Z', '2026-05-14T09:00Z'),
    ])
  })
  it('keeps the wall clock over a change of the clock', () => {
    expect(workingSpans(london, at('2026-03-27T00:00Z'), at('2026-03-31T00:00Z'))).toEqual([
      span('2026-03-27T09:00Z', '2026-03-27T17:00Z'),
      span('2026-03-30T08:00Z', '2026-03-30T16:00Z'),
    ])
  })
  it('joins hours that touch, over midnight too', () => {
    expect(workingSpans(always('America/New_York'), at('2026-03-01T00:00Z'), at('2026-03-15T00:00Z')))
      .toEqual([span('2026-03-01T00:00Z', '2026-03-15T00:00Z')])
  })
  it('takes time off away, at its ends and in the middle', () => {
    const calendar = weekdays('UTC', 9, 17, [
      span('2026-05-12T00:00Z', '2026-05-12T10:00Z'),
      span('2026-05-12T12:00Z', '2026-05-12T13:00Z'),
      span('2026-05-12T12:30Z', '2026-05-12T14:00Z'),
      span('2026-05-13T09:00Z', '2026-05-13T17:00Z'),
    ])
    expect(workingSpans(calendar, at('2026-05-12T00:00Z'), at('2026-05-14T00:00Z'))).toEqual([
      span('2026-05-12T10:00Z', '2026-05-12T12:00Z'), span('2026-05-12T14:00Z', '2026-05-12T17:00Z'),
    ])
  })
  it('takes time off to the millisecond', () => {
    const fromMs = at('2026-05-12T09:00Z')
    const calendar = weekdays('UTC', 9, 17, [{ fromMs: fromMs + 1, toMs: fromMs + 3 }])
    expect(workingSpans(calendar, fromMs, fromMs + 10)).toEqual([{ fromMs, toMs: fromMs + 1 }, { fromMs: fromMs + 3, toMs: fromMs + 10 }])
  })
  it('loses the spring gap and lasts longer over the autumn repeat', () => {
    const night = once('Europe/London', 7, 0, 240)
    expect(workingSpans(night, at('2026-03-28T00:00Z'), at('2026-03-30T00:00Z'))).toEqual([span('2026-03-29T00:00Z', '2026-03-29T03:00Z')])
    expect(workingSpans(night, at('2026-10-24T00:00Z'), at('2026-10-26T00:00Z'))).toEqual([span('2026-10-24T23:00Z', '2026-10-25T04:00Z')])
  })
  it('drops hours that end before they begin once resolved', () => {
    // 01:30 does not exist and is read as 02:30; 02:15 does exist and comes before it.
    const calendar = once('Europe/London', 7, 90, 135)
    expect(workingSpans(calendar, at('2026-03-28T00:00Z'), at('2026-03-30T00:00Z'))).toEqual([])
    expect(workingSpans(calendar, at('2026-04-04T00:00Z'), at('2026-04-06T00:00Z'))).toHaveLength(1)
  })
  it('copes with a midnight that does not exist', () => {
    // Havana skips 00:00 to 01:00 on 2026-03-08; Saturday until midnight and Sunday from midnight meet at 05:00Z.
    const calendar = { timeZone: 'America/Havana', weekly: [{ weekday: 6, fromMinute: 1320, toMinute: 1440 }, { weekday: 7, fromMinute: 0, toMinute: 120 }], timeOff: [] }
    expect(workingSpans(calendar, at('2026-03-07T12:00Z'), at('2026-03-08T12:00Z'))).toEqual([span('2026-03-08T03:00Z', '2026-03-08T06:00Z')])
  })
  it('is empty for an empty range, no hours, or hours the wrong way round', () => {
    const nowMs = at('2026-05-12T10:00Z')
    expect(workingSpans(london, nowMs, nowMs)).toEqual([])
    expect(workingSpans(london, nowMs, nowMs - HOUR_MS)).toEqual([])
    expect(workingSpans({ ...london, weekly: [] }, nowMs, nowMs + HOUR_MS)).toEqual([])
    expect(workingSpans(once('UTC', 2, 900, 600), nowMs, nowMs + 24 * HOUR_MS)).toEqual([])
  })
  it('throws rather than walk for ever', () => {
    expect(() => workingSpans(london, 0, Number.POSITIVE_INFINITY)).toThrow(RangeError)
    expect(() => workingSpans(london, Number.NaN, 0)).toThrow(RangeError)
    expect(() => workingSpans(london, 0, 8e15)).toThrow(RangeError)
    expect(() => workingSpans({ ...london, timeZone: 'Nowhere/Town' }, 0, HOUR_MS)).toThrow(RangeError)
  })
  it('does not change the calendar', () => {
    const timeOff = Object.freeze([Object.freeze(span('2026-05-12T12:00Z', '2026-05-12T13:00Z')), Object.freeze(span('2026-05-12T10:00Z', '2026-05-12T12:00Z'))])
    expect(workingSpans({ ...weekdays('UTC', 9, 17), timeOff }, at('2026-05-12T00:00Z'), at('2026-05-13T00:00Z'))).toHaveLength(2)
  })
})

describe('mergedSpans and clippedSpans', () => {
  it('orders, joins what touches or overlaps, leaves out what is empty', () => {
    expect(mergedSpans([{ fromMs: 8, toMs: 9 }, { fromMs: 3, toMs: 5 }, { fromMs: 1, toMs: 3 }, { fromMs: 2, toMs: 4 }, { fromMs: 6, toMs: 6 }]))
      .toEqual([{ fromMs: 1, toMs: 5 }, { fromMs: 8, toMs: 9 }])
    expect(mergedSpans([])).toEqual([])
  })
  it('keeps a span within a longer one from shortening it', () => {
    expect(mergedSpans([{ fromMs: 0, toMs: 10 }, { fromMs: 2, toMs: 4 }])).toEqual([{ fromMs: 0, toMs: 10 }])
  })
  it('cuts', () => {
    expect(clippedSpans([{ fromMs: 0, toMs: 4 }, { fromMs: 4, toMs: 9 }, { fromMs: 9, toMs: 12 }], 4, 8)).toEqual([{ fromMs: 4, toMs: 8 }])
  })
})
