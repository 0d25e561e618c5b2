import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { blurM, headTravelPerFrameM, impactTimeUncertaintyS, longestExposureS } from '#shared/domain/film/advice/travel'

const speeds = fc.double({ min: 0.1, max: 70, noNaN: true })
const rates = fc.double({ min: 1, max: 1000, noNaN: true })

describe('travel and blur', () => {
  it('adds the travel of all frames of a second up to the speed', () => {
    fc.assert(fc.property(speeds, rates, (speedMps, rate) => {
      expect(headTravelPerFrameM(speedMps, rate) * rate).toBeCloseTo(speedMps, 9)
    }))
  })

  it('never smears farther than the head moves in a frame', () => {
    fc.assert(fc.property(speeds, rates, fc.double({ min: 0, max: 1, noNaN: true }), (speedMps, rate, share) => {
      expect(blurM(speedMps, share / rate)).toBeLessThanOrEqual(headTravelPerFrameM(speedMps, rate) * (1 + 1e-12))
    }))
  })

  it('finds the exposure of its own blur', () => {
    fc.assert(fc.property(speeds, fc.double({ min: 0, max: 0.01, noNaN: true }), (speedMps, exposureS) => {
      expect(longestExposureS(speedMps, blurM(speedMps, exposureS))).toBeCloseTo(exposureS, 12)
    }))
  })

  it.each([
    ['a rate of 0', () => headTravelPerFrameM(40, 0)],
    ['a rate that is no number', () => headTravelPerFrameM(40, Number.NaN)],
    ['a speed under 0', () => headTravelPerFrameM(-1, 30)],
    ['a speed that is no number', () => blurM(Number.NaN, 0.001)],
    ['an exposure under 0', () => blurM(40, -0.001)],
    ['a head that stands still', () => longestExposureS(0, 0.01)],
    ['no rate for impact', () => impactTimeUncertaintyS(0)],
  ])('refuses %s', (_, compute) => {
    expect(compute).toThrow(RangeError)
  })
})
