import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { estimateHeadSpeed, MILE_PER_HOUR_MPS, YARD_M } from '#shared/domain/film/advice/speed'
import { CLUBS } from '#shared/domain/review/clubs'

const mphOf = (club: string, usualCarryM?: number): number => (estimateHeadSpeed(club, usualCarryM)?.speedMps ?? Number.NaN) / MILE_PER_HOUR_MPS
const FULL_CLUBS = CLUBS.filter(club => club !== 'putter')

describe('head speed without a carry', () => {
  it.each([
    // Common practice, no published source; the line through 76 mph at 37 in and 90 at 45: 1.75 mph an inch.
    ['driver', 90], ['7-iron', 76], ['5-iron', 77.75], ['3-wood', 86.5], ['lob-wedge', 72.5], ['putter', 4],
  ])('%s: %d mph', (club, expected) => {
    expect(mphOf(club)).toBeCloseTo(expected, 9)
    expect(estimateHeadSpeed(club)?.basis).toBe('usual')
  })

  it('knows none for a club outside the list', () => {
    expect(estimateHeadSpeed('one-off chipper', 100)).toBeUndefined()
  })
})

describe('head speed from carry', () => {
  it('lies on the straight line between 7-iron and driver', () => {
    // 41 in would be half way: 2.1 yards a mph. A hybrid of 40 in: 1.85 + 3/8 · 0.5 = 2.0375.
    expect(mphOf('hybrid', 163 * YARD_M)).toBeCloseTo(80, 9)
    // A 5-iron of 38 in: 1.85 + 1/8 · 0.5 = 1.9125.
    expect(mphOf('5-iron', 153 * YARD_M)).toBeCloseTo(80, 9)
  })

  it.each([
    ['a part shot', 18 * YARD_M], ['a slip of the keyboard', 1800 * YARD_M], ['nothing', 0], ['less than nothing', -100],
    ['no number', Number.NaN], ['no end', Number.POSITIVE_INFINITY],
  ])('does not believe %s', (_, carryM) => {
    expect(estimateHeadSpeed('7-iron', carryM)).toEqual(estimateHeadSpeed('7-iron'))
  })

  it('rises with the carry and stays within what is believed', () => {
    fc.assert(fc.property(fc.constantFrom(...FULL_CLUBS), fc.double({ min: 60, max: 150, noNaN: true }), fc.double({ min: 1, max: 50, noNaN: true }), (club, carryM, moreM) => {
      const slower = estimateHeadSpeed(club, carryM)
      const faster = estimateHeadSpeed(club, carryM + moreM)
      expect(slower?.basis).toBe('carry')
      expect(faster?.speedMps).toBeGreaterThan(slower?.speedMps ?? Number.POSITIVE_INFINITY)
      expect(mphOf(club, carryM)).toBeGreaterThanOrEqual(20)
      expect(mphOf(club, carryM)).toBeLessThanOrEqual(150)
    }))
  })
})
