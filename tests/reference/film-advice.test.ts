import { describe, expect, it } from 'vitest'
import { adviseOnFilm } from '#shared/domain/film/advice/advise'
import { findSlowMotion } from '#shared/domain/film/advice/slow-motion'
import { estimateHeadSpeed, MILE_PER_HOUR_MPS, YARD_M } from '#shared/domain/film/advice/speed'
import { blurM, headTravelPerFrameM, impactTimeUncertaintyS, longestExposureS } from '#shared/domain/film/advice/travel'

const mph = (miles: number): number => miles * MILE_PER_HOUR_MPS

describe('head travel per frame: v / fps, 1 mph = 0.44704 m/s exactly (recomputed)', () => {
  it('takes 90 mph as 40.2336 m/s', () => {
    expect(mph(90)).toBeCloseTo(40.2336, 10)
  })

  it.each([
    [90, 30, 134.11], [90, 60, 67.06], [90, 120, 33.53], [90, 240, 16.76],
    [60, 240, 11.18], [80, 240, 14.90], [100, 240, 18.63], [113, 240, 21.05],
  ])('%d mph at %d frames a second: %d cm', (miles, framesPerSecond, expectedCm) => {
    expect(Math.abs(headTravelPerFrameM(mph(miles), framesPerSecond) * 100 - expectedCm)).toBeLessThan(1e-2)
  })
})

describe('blur: v × exposure (recomputed)', () => {
  it.each([[500, 8.05], [1000, 4.02], [2000, 2.01], [4000, 1.01]])('90 mph at 1/%d s: %d cm', (shutter, expectedCm) => {
    expect(Math.abs(blurM(mph(90), 1 / shutter) * 100 - expectedCm)).toBeLessThan(1e-2)
  })

  it('needs 1/4023 s or shorter for 1 cm at 90 mph', () => {
    expect(1 / longestExposureS(mph(90), 0.01)).toBeCloseTo(4023.36, 2)
  })
})

describe('moment of impact, unaided: ±1 / (2 fps) (recomputed)', () => {
  it.each([[30, 16.7], [60, 8.3], [120, 4.2], [240, 2.1]])('%d frames a second: %d ms', (framesPerSecond, expectedMs) => {
    expect(Math.abs(impactTimeUncertaintyS(framesPerSecond) * 1000 - expectedMs)).toBeLessThan(0.05)
  })
})

describe('slow motion, kind 1: androidx/media MdtaMetadataEntry, com.android.capture.fps', () => {
  it('divides 240 played at 30 by 8', () => {
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: 240 })).toEqual({ kind: 'slowed-by-known-factor', realTimeFactor: 1 / 8 })
  })
})

describe('slow motion, kind 2: times are true, or stretched without a word', () => {
  it('takes a file with steps of 4.17 ms as real time', () => {
    expect(findSlowMotion({ framesPerSecond: 1 / 0.00417, captureFramesPerSecond: undefined }).kind).toBe('real-time')
  })

  it('takes a downswing of 8 frames of 30 a second as real (Grober & Cholewicki, arXiv physics/0611291)', () => {
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: undefined, downswingFileS: 8 / 30 }).kind).toBe('real-time')
  })

  it('asks when the same downswing plays eight times as long', () => {
    expect(findSlowMotion({ framesPerSecond: 30, captureFramesPerSecond: undefined, downswingFileS: 8 * 8 / 30 }))
      .toMatchObject({ kind: 'ask', reason: 'downswing-does-not-fit', fittingFramesPerSecond: [240] })
  })
})

describe('speed from carry: common practice, no published source', () => {
  it('is yards / 1.85 for a 7-iron and yards / 2.35 for a driver', () => {
    expect(estimateHeadSpeed('7-iron', 148 * YARD_M)?.speedMps).toBeCloseTo(mph(80), 9)
    expect(estimateHeadSpeed('driver', 235 * YARD_M)?.speedMps).toBeCloseTo(mph(100), 9)
  })

  it('moves a club golfer\'s 7-iron (76 mph) 14 cm between frames at 240 a second', () => {
    const film = { framesPerSecond: 240, captureFramesPerSecond: undefined, widthPx: 1080, heightPx: 1920, durationMs: 3100 }
    expect(adviseOnFilm(film, { view: 'face_on', club: '7-iron', handedness: 'right' }).map(({ words }) => words))
      .toContain('The club head moves about 14 cm between frames: fine for impact.')
  })
})
