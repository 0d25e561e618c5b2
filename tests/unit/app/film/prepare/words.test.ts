import { describe, expect, it } from 'vitest'
import { FILM_REFUSALS } from '#shared/domain/film/refusals'
import { asItWas } from '~/film/prepare/as-it-was'
import type { ClipFacts } from '~/film/prepare/clip-facts'
import { explainWay } from '~/film/prepare/explain-way'
import { lumaOf, meanChange, meanLuma } from '~/film/prepare/luma'
import { slowedByOf } from '~/film/prepare/slow-motion'

const FACTS: ClipFacts = {
  container: 'mp4', bytes: 1000, codec: 'avc', codecString: 'avc1.640028', widthPx: 96, heightPx: 160, rotationDeg: 0,
  durationMs: 1000, frameCount: 30, framesPerSecond: 30, timeBase: 30,
  frameTicks: Array.from({ length: 30 }, (_, index) => index), frameTimesS: Array.from({ length: 30 }, (_, index) => index / 30),
  captureFramesPerSecond: undefined, hasSound: false, hasLocation: false, deviceTags: [], isMirrored: false, hasSquarePixels: true,
  isHighDynamicRange: false, longestKeyGapS: 1, canDecode: false, encoder: undefined,
}

describe('explainWay', () => {
  it('says what was done, in plain words', () => {
    expect(explainWay({ way: 're-encoded', reason: undefined })).toContain('Every frame is still there')
    expect(explainWay({ way: 'remuxed', reason: undefined })).toContain('all of it will be sent, also what you cut away')
    for (const way of ['re-encoded', 'cut-and-stripped', 'remuxed', 'untouched'] as const) expect(explainWay({ way, reason: undefined })).not.toMatch(/encod|codec|remux|!/)
  })

  it('says why a clip cannot go as it is, and what to do', () => {
    expect(explainWay({ way: 'untouched', reason: 'has-sound' })).toContain(FILM_REFUSALS['has-sound'].whatToDo)
  })
})

describe('asItWas', () => {
  it('keeps everything at its own time, and names what the server would refuse', () => {
    expect(asItWas(FACTS, [[0.5, 2], [0.1, 0.3]], [])).toMatchObject({ way: 'untouched', frames: 30, swings: [[0.1, 0.3], [0.5, 1]], reason: undefined })
    expect(asItWas({ ...FACTS, hasSound: true }, [], []).reason).toBe('has-sound')
    expect(asItWas(FACTS, [], []).swings).toEqual([[0, 1]])
  })
})

describe('slowedByOf', () => {
  it('believes a tag that a phone stretches for, and no other', () => {
    expect(slowedByOf({ captureFramesPerSecond: 240, framesPerSecond: 30 })).toBeCloseTo(8)
    expect(slowedByOf({ captureFramesPerSecond: 60, framesPerSecond: 30 })).toBe(1)
    expect(slowedByOf({ captureFramesPerSecond: undefined, framesPerSecond: 30 })).toBe(1)
  })
})

describe('brightness', () => {
  it('weighs colours as eyes do', () => {
    // Rec. 709: 0.7152 of white's brightness is green's.
    expect(meanLuma(lumaOf(new Uint8ClampedArray([0, 255, 0, 255])))).toBeCloseTo(0.7152, 2)
    expect(meanLuma(lumaOf(new Uint8ClampedArray([255, 255, 255, 255, 0, 0, 0, 255])))).toBeCloseTo(0.5, 2)
    expect(meanLuma(new Uint8Array())).toBe(0)
  })

  it('does not count grain as motion', () => {
    expect(meanChange(new Uint8Array([100, 100]), new Uint8Array([104, 97]))).toBe(0)
    // Half of the picture by 57 - 6 of 255.
    expect(meanChange(new Uint8Array([100, 100]), new Uint8Array([157, 100]))).toBeCloseTo(0.1, 6)
    expect(meanChange(new Uint8Array(), new Uint8Array())).toBe(0)
  })
})
