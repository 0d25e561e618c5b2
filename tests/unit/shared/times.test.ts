import { describe, expect, it } from 'vitest'
import { formatDate, formatDay, formatHour, formatMoment, formatMomentWithYear, formatWorkingTime } from '#shared/utils/times'

/** Thursday 21 May 2026, 15:00 UTC. */
const thursday = Date.UTC(2026, 4, 21, 15)
const minute = 60_000

describe('moments', () => {
  it('are told in the reader\'s zone', () => {
    // Stockholm keeps UTC+2 in May, New York UTC-4, Kathmandu UTC+5:45 all year.
    expect(formatMoment(thursday, 'Europe/Stockholm')).toBe('Thu 21 May, 17:00')
    expect(formatMoment(thursday, 'America/New_York')).toBe('Thu 21 May, 11:00')
    expect(formatMoment(thursday, 'Asia/Kathmandu')).toBe('Thu 21 May, 20:45')
  })

  it('change the day with the zone', () => {
    const evening = Date.UTC(2026, 4, 21, 23, 30)
    expect(formatMoment(evening, 'Europe/Stockholm')).toBe('Fri 22 May, 01:30')
    expect(formatDay(evening, 'Europe/Stockholm')).toBe('Fri 22 May')
    expect(formatDay(evening, 'UTC')).toBe('Thu 21 May')
  })

  it('write midnight as 00:00', () => {
    expect(formatHour(Date.UTC(2026, 0, 1), 'UTC')).toBe('00:00')
  })

  it('write September with three letters, whatever the data of the machine says', () => {
    expect(formatDay(Date.UTC(2026, 8, 5, 12), 'UTC')).toBe('Sat 5 Sep')
  })

  it('follow daylight saving', () => {
    // London goes from UTC to UTC+1 on 29 March 2026 at 01:00 UTC.
    expect(formatHour(Date.UTC(2026, 2, 29, 0, 59), 'Europe/London')).toBe('00:59')
    expect(formatHour(Date.UTC(2026, 2, 29, 1, 0), 'Europe/London')).toBe('02:00')
  })

  it('name the year only when it is another one for the reader', () => {
    const newYear = Date.UTC(2026, 11, 31, 23, 30)
    expect(formatMomentWithYear(newYear, 'UTC', thursday)).toBe('Thu 31 Dec, 23:30')
    expect(formatMomentWithYear(newYear, 'Europe/Stockholm', thursday)).toBe('Fri 1 Jan 2027, 00:30')
  })

  it('write a date for what lies back', () => {
    expect(formatDate(thursday, 'UTC')).toBe('21 May 2026')
  })
})

describe('working time', () => {
  it.each([
    [0, '0 min'],
    [minute - 1, '0 min'],
    [14 * minute, '14 min'],
    [59 * minute + 59_999, '59 min'],
    [60 * minute, '1 h'],
    [65 * minute, '1 h 05'],
    [105 * minute, '1 h 45'],
    [9 * 60 * minute, '9 h'],
    [-minute + 1, '0 min'],
    [-20 * minute, '−20 min'],
    [-105 * minute, '−1 h 45'],
  ])('of %d ms reads %s', (lengthMs, words) => {
    expect(formatWorkingTime(lengthMs)).toBe(words)
  })
})
