import { describe, expect, it } from 'vitest'
import { epochDayAt, isTimeZone, wallInstantMs, weekdayOf } from '#shared/domain/turnaround/zone'
import { at } from './sample-calendars'

const dayOf = (date: string): number => at(`${date}T00:00Z`) / 86_400_000

describe('isTimeZone', () => {
  it.each(['Europe/London', 'America/Argentina/Ushuaia', 'UTC', 'Etc/GMT+5'])('knows %s', (name) => {
    expect(isTimeZone(name)).toBe(true)
  })
  it.each(['', '+05:30', 'Nowhere/Town', '2020-01-01T00:00[Asia/Tokyo]', ' UTC', 'Europe/London\n'])('refuses %j', (name) => {
    expect(isTimeZone(name)).toBe(false)
  })
})

describe('weekdayOf', () => {
  it.each([['1970-01-01', 4], ['1969-12-31', 3], ['1969-12-29', 1], ['2026-05-12', 2], ['2028-02-29', 2], ['2026-05-17', 7]])('%s is day %i', (date, weekday) => {
    expect(weekdayOf(dayOf(date))).toBe(weekday)
  })
})

describe('wallInstantMs', () => {
  it('reads 1440 as midnight of the next date', () => {
    expect(wallInstantMs('Europe/London', dayOf('2026-05-12'), 1440)).toBe(at('2026-05-12T23:00Z'))
  })
  it('takes the first of a repeated time', () => {
    expect(wallInstantMs('Europe/London', dayOf('2026-10-25'), 90)).toBe(at('2026-10-25T00:30Z'))
  })
  it('moves a skipped time on by the gap', () => {
    expect(wallInstantMs('Europe/London', dayOf('2026-03-29'), 90)).toBe(at('2026-03-29T01:30Z'))
    expect(wallInstantMs('Australia/Lord_Howe', dayOf('2026-10-04'), 135)).toBe(at('2026-10-03T15:45Z'))
  })
  it('answers alike when asked again', () => {
    expect(wallInstantMs('Asia/Kathmandu', 20_000, 601)).toBe(wallInstantMs('Asia/Kathmandu', 20_000, 601))
  })
  it('throws on an unknown zone', () => {
    expect(() => wallInstantMs('Nowhere/Town', 0, 0)).toThrow(RangeError)
  })
})

describe('epochDayAt', () => {
  it.each([
    ['Pacific/Kiritimati', '2026-05-12T10:00Z', '2026-05-13'],
    ['Pacific/Kiritimati', '2026-05-12T09:59Z', '2026-05-12'],
    ['Pacific/Pago_Pago', '2026-05-12T10:59Z', '2026-05-11'],
    ['Pacific/Pago_Pago', '2026-05-12T11:00Z', '2026-05-12'],
    ['UTC', '1969-12-31T23:59Z', '1969-12-31'],
  ])('%s at %s is %s', (zone, instant, date) => {
    expect(epochDayAt(zone, at(instant))).toBe(dayOf(date))
  })
})
