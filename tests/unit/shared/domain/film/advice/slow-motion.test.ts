import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DOWNSWING_S, findSlowMotion } from '#shared/domain/film/advice/slow-motion'

const NO_TAG = { captureFramesPerSecond: undefined }

describe('with a rate in the file', () => {
  it.each([
    [30, 240, 1 / 8], [30, 120, 1 / 4], [29.97, 240, 29.97 / 240], [24, 960, 1 / 40],
  ])('slows %d from %d by a known factor', (framesPerSecond, captureFramesPerSecond, realTimeFactor) => {
    expect(findSlowMotion({ framesPerSecond, captureFramesPerSecond })).toEqual({ kind: 'slowed-by-known-factor', realTimeFactor })
  })

  it.each([[240, 240], [239.8, 240], [30, 29.97], [60, 60]])('plays %d filmed at %d in real time', (framesPerSecond, captureFramesPerSecond) => {
    expect(findSlowMotion({ framesPerSecond, captureFramesPerSecond })).toEqual({ kind: 'real-time', realTimeFactor: 1 })
  })

  it('asks where a phone may or may not have stretched: twice the rate or less', () => {
    // Android stretches only when the rates differ by more than twice (frameworks/av, commit 5a4a0a1).
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: 60 })).toMatchObject({ kind: 'ask', reason: 'rate-unclear' })
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: 60, downswingFileS: 0.55 }).kind).toBe('slowed-by-known-factor')
  })

  it('asks about time-lapse', () => {
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: 5 })).toMatchObject({ kind: 'ask', reason: 'faster-than-filmed' })
  })

  it('asks when the downswing contradicts the file', () => {
    // 0.27 s in the file would be 0.034 s of real time.
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: 240, downswingFileS: 0.27 })).toMatchObject({ kind: 'ask', reason: 'downswing-does-not-fit', filmedFramesPerSecond: 240, downswingS: 0.03375, fittingFramesPerSecond: [] })
  })
})

describe('without a rate in the file', () => {
  it('is real from 100 frames a second on: no phone plays a stretched file so fast', () => {
    expect(findSlowMotion({ framesPerSecond: 240, ...NO_TAG }).kind).toBe('real-time')
    expect(findSlowMotion({ framesPerSecond: 60, ...NO_TAG })).toEqual({ kind: 'ask', reason: 'no-rate-in-file', filmedFramesPerSecond: undefined, downswingS: undefined, fittingFramesPerSecond: [] })
  })

  it.each([[0.2], [0.27], [0.4]])('is real when the downswing lasts %d s', (downswingFileS) => {
    expect(findSlowMotion({ framesPerSecond: 30, ...NO_TAG, downswingFileS }).kind).toBe('real-time')
  })

  it('gives a downswing the doubt of one frame', () => {
    // Top and impact are told to half a frame each: at 30 a second 0.43 may be 0.4, at 240 it may not.
    expect(findSlowMotion({ framesPerSecond: 30, ...NO_TAG, downswingFileS: 0.43 }).kind).toBe('real-time')
    expect(findSlowMotion({ framesPerSecond: 240, ...NO_TAG, downswingFileS: 0.43 }).kind).toBe('ask')
  })

  it('names the rates that would fit', () => {
    expect(findSlowMotion({ framesPerSecond: 30, ...NO_TAG, downswingFileS: 1.1 })).toMatchObject({ fittingFramesPerSecond: [120] })
    // 1.6 s is 0.4 s of real time at 120 and 0.2 at 240: either.
    expect(findSlowMotion({ framesPerSecond: 30, ...NO_TAG, downswingFileS: 1.6 })).toMatchObject({ fittingFramesPerSecond: [120, 240] })
    expect(findSlowMotion({ framesPerSecond: 30, ...NO_TAG, downswingFileS: 60 })).toMatchObject({ reason: 'downswing-does-not-fit', fittingFramesPerSecond: [] })
  })
})

describe('what the student says', () => {
  it('goes before the file', () => {
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: 60, saidFramesPerSecond: 240 })).toEqual({ kind: 'slowed-by-known-factor', realTimeFactor: 1 / 8 })
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: 240, saidFramesPerSecond: 30 }).kind).toBe('real-time')
    expect(findSlowMotion({ framesPerSecond: 30, ...NO_TAG, saidFramesPerSecond: 60 })).toEqual({ kind: 'slowed-by-known-factor', realTimeFactor: 1 / 2 })
  })

  it('is checked by the downswing like the rest', () => {
    expect(findSlowMotion({ framesPerSecond: 30, ...NO_TAG, saidFramesPerSecond: 240, downswingFileS: 0.3 }).kind).toBe('ask')
  })
})

describe('signs that make no sense', () => {
  it.each([[0], [-30], [Number.NaN], [Number.POSITIVE_INFINITY], [5e-324], [5000]])('a rate of %d counts as unknown', (rate) => {
    expect(findSlowMotion({ framesPerSecond: rate, ...NO_TAG })).toMatchObject({ kind: 'ask', reason: 'no-rate-in-file' })
    expect(findSlowMotion({ framesPerSecond: 240, captureFramesPerSecond: rate, saidFramesPerSecond: rate }).kind).toBe('real-time')
  })

  it.each([[0], [-1], [Number.NaN], [61]])('a downswing of %d s counts as not measured', (downswingFileS) => {
    expect(findSlowMotion({ framesPerSecond: 240, ...NO_TAG, downswingFileS }).kind).toBe('real-time')
  })
})

describe('any signs', () => {
  const rate = fc.oneof(fc.double(), fc.double({ min: 1, max: 1000, noNaN: true }))

  it('never gives a factor that a downswing contradicts, nor one outside 0 to 1', () => {
    fc.assert(fc.property(rate, fc.option(rate, { nil: undefined }), fc.option(fc.double({ min: 0, max: 5, noNaN: true }), { nil: undefined }), (framesPerSecond, captureFramesPerSecond, downswingFileS) => {
      const finding = findSlowMotion({ framesPerSecond, captureFramesPerSecond, downswingFileS })
      if (finding.kind === 'ask') return
      expect(finding.realTimeFactor).toBeGreaterThan(0)
      expect(finding.realTimeFactor).toBeLessThanOrEqual(1)
      if (downswingFileS === undefined || downswingFileS === 0) return
      const frameS = finding.realTimeFactor / framesPerSecond
      expect(downswingFileS * finding.realTimeFactor).toBeGreaterThanOrEqual(DOWNSWING_S.min - frameS)
      expect(downswingFileS * finding.realTimeFactor).toBeLessThanOrEqual(DOWNSWING_S.max + frameS)
    }), { numRuns: 500 })
  })

  it('stretches any film back: filmed at n times the rate is a factor of 1/n', () => {
    fc.assert(fc.property(fc.integer({ min: 3, max: 16 }), fc.double({ min: 24, max: 60, noNaN: true }), (times, framesPerSecond) => {
      const finding = findSlowMotion({ framesPerSecond, captureFramesPerSecond: framesPerSecond * times })
      expect(finding.kind === 'slowed-by-known-factor' ? finding.realTimeFactor * times : Number.NaN).toBeCloseTo(1, 9)
    }))
  })
})
