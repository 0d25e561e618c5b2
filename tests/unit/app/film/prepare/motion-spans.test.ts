import { describe, expect, it } from 'vitest'
import type { MotionSample } from '~/film/prepare/motion-spans'
import { findSwingSpans } from '~/film/prepare/motion-spans'

const RATE = 30

/** Motion over time: grain everywhere, and humps as high and as wide (at their foot) as told. */
function motion(endS: number, humps: { atS: number, high: number, wideS: number }[], grain = 0.0002): MotionSample[] {
  return Array.from({ length: Math.floor(endS * RATE) }, (_, index) => {
    const timeS = (index + 1) / RATE
    const lifted = humps.map(({ atS, high, wideS }) => Math.max(0, 1 - Math.abs(timeS - atS) / (wideS / 2)) * high)
    return { timeS, amount: Math.max(...lifted, 0) + grain * (1 + Math.sin(index * 12.9898)) / 2 }
  })
}

const swing = (atS: number, high = 0.02) => ({ atS, high, wideS: 0.8 })

function expectSpans(found: [number, number][], expected: [number, number][]) {
  expect(found).toHaveLength(expected.length)
  found.forEach(([fromS, toS], index) => {
    expect(fromS).toBeCloseTo(expected[index]?.[0] ?? NaN, 1)
    expect(toS).toBeCloseTo(expected[index]?.[1] ?? NaN, 1)
  })
}

describe('findSwingSpans', () => {
  it('gives a swing a second and a half on either side', () => {
    expectSpans(findSwingSpans(motion(10, [swing(4)]), { startS: 0, endS: 10 }), [[2.5, 5.5]])
  })

  it('stays within the clip', () => {
    expectSpans(findSwingSpans(motion(2.2, [swing(1)]), { startS: 0, endS: 2.2 }), [[0, 2.2]])
  })

  it('finds several, in order, those that overlap as one', () => {
    expectSpans(findSwingSpans(motion(40, [swing(30), swing(10), swing(12, 0.018), swing(20)]), { startS: 0, endS: 40 }), [[8.5, 13.5], [18.5, 21.5], [28.5, 31.5]])
  })

  it('takes the way back and the way down for one swing', () => {
    expectSpans(findSwingSpans(motion(10, [{ atS: 3.5, high: 0.013, wideS: 0.6 }, swing(4.2)]), { startS: 0, endS: 10 }), [[2.7, 5.7]])
  })

  it('gives the six strongest of more', () => {
    const strengths = [0.02, 0.016, 0.019, 0.02, 0.0185, 0.019, 0.02, 0.0155]
    const found = findSwingSpans(motion(60, strengths.map((high, index) => swing(4 + index * 7, high))), { startS: 0, endS: 60 })
    expect(found.map(([fromS]) => Math.round((fromS + 1.5 - 4) / 7))).toEqual([0, 2, 3, 4, 5, 6])
  })

  it('does not take a walk through the picture for a swing, nor lose the swing beside it', () => {
    expectSpans(findSwingSpans(motion(30, [{ atS: 5, high: 0.09, wideS: 8 }, swing(18)]), { startS: 0, endS: 30 }), [[16.5, 19.5]])
  })

  it('leaves out small things: a waggle, a ball that is rolled in', () => {
    expectSpans(findSwingSpans(motion(20, [swing(10), { atS: 7, high: 0.008, wideS: 0.7 }, { atS: 15, high: 0.012, wideS: 1.2 }]), { startS: 0, endS: 20 }), [[8.5, 11.5]])
  })

  it('finds a swing before a tree in the wind', () => {
    expectSpans(findSwingSpans(motion(20, [swing(10, 0.03)], 0.008), { startS: 0, endS: 20 }), [[8.5, 11.5]])
  })

  it('suggests nothing where nothing stands out', () => {
    expect(findSwingSpans(motion(20, []), { startS: 0, endS: 20 })).toEqual([])
    expect(findSwingSpans(motion(20, [], 0.01).map(sample => ({ ...sample, amount: sample.amount + 0.01 })), { startS: 0, endS: 20 })).toEqual([])
    expect(findSwingSpans([], { startS: 0, endS: 20 })).toEqual([])
  })

  it('counts real seconds where the clip plays slowed', () => {
    const slowed = motion(10, [swing(4)]).map(({ timeS, amount }) => ({ timeS: timeS * 8, amount }))
    expectSpans(findSwingSpans(slowed, { startS: 0, endS: 80, slowedBy: 8 }), [[20, 44]])
  })

  it('is not misled by one frame that was stored badly', () => {
    const samples = motion(20, [swing(10)])
    samples[100] = { timeS: 101 / RATE, amount: 0.03 }
    expectSpans(findSwingSpans(samples, { startS: 0, endS: 20 }), [[8.5, 11.5]])
  })
})
