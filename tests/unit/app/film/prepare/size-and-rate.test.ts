import { describe, expect, it } from 'vitest'
import { bitsPerSecondFor } from '~/film/prepare/bit-rate'
import { preparedSize } from '~/film/prepare/picture-size'

describe('preparedSize', () => {
  it.each([
    [[1080, 1920], [1080, 1920]],
    [[2160, 3840], [1080, 1920]],
    [[3840, 2160], [1920, 1080]],
    [[720, 1280], [720, 1280]],
    // Half a pixel has no colour: 1081 becomes 1080 or 1082, 3024 × 4032 becomes 1440 × 1920.
    [[3024, 4032], [1440, 1920]],
    [[101, 99], [102, 100]],
    [[1, 1], [2, 2]],
  ])('makes %j into %j', ([widthPx = 0, heightPx = 0], [width, height]) => {
    expect(preparedSize({ widthPx, heightPx })).toEqual({ widthPx: width, heightPx: height })
  })
})

describe('bitsPerSecondFor', () => {
  const phone = { widthPx: 1080, heightPx: 1920, framesPerSecond: 240, durationS: 10 }
  const rich = { bytes: 1e9, durationS: 10 }

  it('spends 0.2 bits a pixel at 30 frames a second, and by frame half of that at 120', () => {
    // 0.2 × 1080 × 1920 × 30 = 12,441,600; √(30 × 120) = 60 frames' worth.
    expect(bitsPerSecondFor({ ...phone, framesPerSecond: 30 }, rich)).toBe(12_441_600)
    expect(bitsPerSecondFor({ ...phone, framesPerSecond: 120 }, rich)).toBe(24_883_200)
  })

  it('spends at most three times what the source did', () => {
    expect(bitsPerSecondFor(phone, { bytes: 1e6, durationS: 8 })).toBe(3_000_000)
  })

  it('keeps a minute under the largest file', () => {
    expect(bitsPerSecondFor({ ...phone, framesPerSecond: 960, durationS: 60 }, { bytes: 1e12, durationS: 60 }) * 60 / 8).toBeLessThan(500 * 1024 * 1024)
  })

  it('leaves a still film enough to be seen', () => {
    expect(bitsPerSecondFor(phone, { bytes: 100, durationS: 8 })).toBe(400_000)
  })
})
