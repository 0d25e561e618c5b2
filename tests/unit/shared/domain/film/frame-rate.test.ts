import { describe, expect, it } from 'vitest'
import { medianFramesPerSecond } from '#shared/domain/film/frame-rate'

function steps(count: number, step: (index: number) => number): number[] {
  return Array.from({ length: count }, (_, index) => step(index))
}

describe('medianFramesPerSecond', () => {
  it('is exact for a constant rate', () => {
    expect(medianFramesPerSecond(steps(60, index => index * 512), 15360)).toBe(30)
  })

  it('gives 29.97 for 1001 ticks at 30000', () => {
    // 30000/1001 = 29.97003, by definition of the NTSC rate.
    expect(medianFramesPerSecond(steps(60, index => index * 1001), 30000)).toBeCloseTo(29.97003, 5)
  })

  it('is not moved by a pause', () => {
    const ticks = steps(60, index => index * 100 + (index > 30 ? 100_000 : 0))
    expect(medianFramesPerSecond(ticks, 24000)).toBe(240)
  })

  it('sees 240 in milliseconds, where single gaps would say 250', () => {
    const ticks = steps(240, index => Math.round(index * 1000 / 240))
    expect(medianFramesPerSecond(ticks, 1000)).toBeCloseTo(240, 0)
  })

  it('takes the middle of two gaps', () => {
    expect(medianFramesPerSecond([0, 100, 300], 15000)).toBe(100)
  })

  it('does with two frames in a coarse time base', () => {
    expect(medianFramesPerSecond([0, 40], 1000)).toBe(25)
  })

  it.each([[[]], [[7]]])('is 0 without two frames: %o', (ticks) => {
    expect(medianFramesPerSecond(ticks, 1000)).toBe(0)
  })
})
