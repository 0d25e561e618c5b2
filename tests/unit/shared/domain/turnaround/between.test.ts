import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { timeInHandMs, workingMsBetween } from '#shared/domain/turnaround/between'
import { HOUR_MS, at, weekdays } from './sample-calendars'

const newYork = weekdays('America/New_York', 9, 17)

describe('workingMsBetween', () => {
  it('counts a week of forty hours, with a change of the clock in it', () => {
    expect(workingMsBetween(newYork, at('2026-03-06T05:00Z'), at('2026-03-13T04:00Z'))).toBe(40 * HOUR_MS)
  })
  it('is zero for one instant and without hours, never minus zero', () => {
    expect(workingMsBetween(newYork, 5, 5)).toBe(0)
    expect(workingMsBetween({ ...newYork, weekly: [] }, at('2026-03-13T00:00Z'), at('2026-03-06T00:00Z'))).toBe(0)
  })
  it('adds up in any order', () => {
    const instant = fc.integer({ min: at('2026-02-20T00:00Z'), max: at('2026-03-20T00:00Z') })
    fc.assert(fc.property(instant, instant, instant, (a, b, c) => {
      expect(workingMsBetween(newYork, a, b) + workingMsBetween(newYork, b, c)).toBe(workingMsBetween(newYork, a, c))
    }), { seed: 4, numRuns: 60 })
  })
})

describe('timeInHandMs', () => {
  const promisedAtMs = at('2026-05-12T21:00Z') // Tuesday, 17:00 in New York
  it.each([
    ['2026-05-12T18:00Z', 3],
    ['2026-05-11T20:00Z', 9],
    ['2026-05-12T21:00Z', 0],
    ['2026-05-13T12:59Z', 0],
    ['2026-05-13T15:00Z', -2],
  ])('at %s it is %d hours', (now, hours) => {
    expect(timeInHandMs(newYork, at(now), promisedAtMs)).toBe(hours * HOUR_MS)
  })
})
