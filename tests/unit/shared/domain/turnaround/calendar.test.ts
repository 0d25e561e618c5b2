import { describe, expect, it } from 'vitest'
import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import { calendarProblems } from '#shared/domain/turnaround/calendar'
import { at, span, weekdays } from './sample-calendars'

const sound = weekdays('Europe/London', 9, 17, [span('2026-05-12T00:00Z', '2026-05-13T00:00Z')])
const found = (change: Partial<WorkingCalendar>) => calendarProblems({ ...sound, ...change }).map(({ code, field, index }) => [code, field, index])

describe('calendarProblems', () => {
  it('finds none in a sound calendar', () => {
    expect(calendarProblems(sound)).toEqual([])
  })
  it('lets hours touch, end at midnight, and time off overlap', () => {
    expect(found({
      weekly: [{ weekday: 1, fromMinute: 600, toMinute: 720 }, { weekday: 1, fromMinute: 720, toMinute: 1440 }],
      timeOff: [span('2026-05-12T00:00Z', '2026-05-14T00:00Z'), span('2026-05-13T00:00Z', '2026-05-15T00:00Z')],
    })).toEqual([])
  })
  it('names an unknown zone', () => {
    expect(found({ timeZone: 'Nowhere/Town' })).toEqual([['unknown-time-zone', 'timeZone', null]])
  })
  it('names a week without hours', () => {
    expect(found({ weekly: [] })).toEqual([['empty', 'weekly', null]])
  })
  it.each([0, 8, 1.5, Number.NaN])('names weekday %s', (weekday) => {
    expect(found({ weekly: [{ weekday, fromMinute: 0, toMinute: 60 }] })).toEqual([['bad-weekday', 'weekly', 0]])
  })
  it.each([[-1, 60], [0, 1441], [0.5, 60], [1440, 1440], [0, Number.NaN]])('names minutes %s to %s', (fromMinute, toMinute) => {
    expect(found({ weekly: [{ weekday: 1, fromMinute, toMinute }] })).toEqual([['bad-minute', 'weekly', 0]])
  })
  it.each([[600, 600], [600, 599]])('names hours from %i to %i', (fromMinute, toMinute) => {
    expect(found({ weekly: [{ weekday: 1, fromMinute, toMinute }] })).toEqual([['from-not-before-to', 'weekly', 0]])
  })
  it('names the later of two hours that overlap, on the same day only', () => {
    expect(found({
      weekly: [
        { weekday: 1, fromMinute: 540, toMinute: 720 },
        { weekday: 2, fromMinute: 600, toMinute: 660 },
        { weekday: 1, fromMinute: 719, toMinute: 800 },
      ],
    })).toEqual([['overlap', 'weekly', 2]])
  })
  it('reports an entry that is wrong in itself once', () => {
    expect(found({ weekly: [{ weekday: 1, fromMinute: 540, toMinute: 720 }, { weekday: 1, fromMinute: 700, toMinute: 600 }] }))
      .toEqual([['from-not-before-to', 'weekly', 1]])
  })
  it('names time off that is empty or no instant', () => {
    expect(found({ timeOff: [{ fromMs: 5, toMs: 5 }, { fromMs: Number.NaN, toMs: 5 }, { fromMs: 0, toMs: Number.POSITIVE_INFINITY }] })).toEqual([
      ['from-not-before-to', 'timeOff', 0], ['bad-instant', 'timeOff', 1], ['bad-instant', 'timeOff', 2],
    ])
  })
  it('shows all problems at once, each with words', () => {
    const problems = calendarProblems({ timeZone: '', weekly: [], timeOff: [{ fromMs: at('2026-05-12T00:00Z'), toMs: 0 }] })
    expect(problems.map(problem => problem.code)).toEqual(['unknown-time-zone', 'empty', 'from-not-before-to'])
    expect(problems.every(problem => problem.message.length > 10)).toBe(true)
  })
})
