import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { SpanS } from '~/film/prepare/clip-facts'
import { KEY_GAP_MAX_S, lengthOf, OUTPUT_TIME_BASE, planKeep } from '~/film/prepare/keep-plan'

const TICK_S = 1 / OUTPUT_TIME_BASE

function even(count: number, framesPerSecond: number, fromS = 0): number[] {
  return Array.from({ length: count }, (_, index) => fromS + index / framesPerSecond)
}

describe('planKeep', () => {
  it('keeps the frames that begin in a span, half-open', () => {
    const plan = planKeep(even(10, 10), [[0.2, 0.5]], 1)
    expect(plan.spans).toEqual([{ fromFrame: 2, toFrame: 5, oldS: [0.2, 0.4], newS: [0, 0.3] }])
    expect(plan.frames.map(frame => frame.newS)).toEqual([0, 0.1, 0.2])
    expect(plan.swings).toEqual([[0, 0.3]])
  })

  it('takes times from sliders and sums as meaning the frame they lie on', () => {
    expect(planKeep(even(30, 30), [[0.1 + 0.2 + 1e-9, 2 / 3 - 1e-9]], 1).spans).toMatchObject([{ fromFrame: 9, toFrame: 20 }])
  })

  it('keeps everything when nothing was chosen, from 0 whatever the first time', () => {
    const plan = planKeep(even(4, 10, 0.032), [], 0.432)
    expect(plan.frames.map(frame => Math.round(frame.newS * 1000))).toEqual([0, 100, 200, 300])
    expect(lengthOf(plan)).toBeCloseTo(0.4, 4)
  })

  it('joins spans with one median frame, and says where each lies now', () => {
    const plan = planKeep(even(100, 10), [[5, 6], [1, 2]], 10)
    expect(plan.spans.map(span => span.newS)).toEqual([[0, 1], [1, 2]])
    expect(plan.swings).toEqual([[0, 1], [1, 2]])
    expect(plan.frames.map(frame => frame.oldS).slice(9, 11)).toEqual([1.9, 5])
  })

  it('keeps frames of overlapping spans once, and each swing its own place', () => {
    const plan = planKeep(even(100, 10), [[1, 3], [2, 4]], 10)
    expect(plan.spans).toHaveLength(1)
    expect(plan.frames).toHaveLength(30)
    expect(plan.swings).toEqual([[0, 2], [1, 3]])
  })

  it('drops a span without a frame', () => {
    expect(planKeep(even(10, 10), [[20, 30], [0.2, 0.4]], 1).swings).toEqual([[0, 0.2]])
    expect(planKeep(even(10, 10), [[20, 30]], 1).frames).toEqual([])
  })

  it('lets the last frame be as long as it is in the file', () => {
    expect(planKeep(even(10, 10), [[0.8, 1]], 0.95).frames.at(-1)?.lengthS).toBeCloseTo(0.05, 4)
  })

  it.each([[30, 3], [240, 24], [120, 12], [24, 2], [15, 1], [5, 1]])('at %d frames a second makes every %dth a key frame', (rate, every) => {
    const keys = planKeep(even(60, rate), [], 60 / rate).frames.flatMap((frame, index) => frame.isKey ? [index] : [])
    expect(keys).toEqual(Array.from({ length: Math.ceil(60 / every) }, (_, index) => index * every))
  })

  it('with uneven frames and any spans: own distances, rising times, key frames near enough, nothing from outside', () => {
    const gaps = fc.array(fc.double({ min: 0.001, max: 0.09, noNaN: true }), { minLength: 2, maxLength: 200 })
    const spans = fc.array(fc.tuple(fc.double({ min: 0, max: 8, noNaN: true }), fc.double({ min: 0.01, max: 3, noNaN: true })), { minLength: 1, maxLength: 6 })
    fc.assert(fc.property(gaps, spans, (lengths, chosen) => {
      let timeS = 0
      const times = lengths.map(length => timeS += length)
      const keep = chosen.map(([fromS, length]): SpanS => [fromS, fromS + length])
      const plan = planKeep(times, keep, timeS + 0.02)
      const isKept = (frameS: number, slackS: number) => keep.some(([fromS, toS]) => frameS >= fromS - slackS && frameS < toS + slackS)
      for (const frame of plan.frames) expect(isKept(frame.oldS, TICK_S)).toBe(true)
      expect(plan.frames.length).toBeGreaterThanOrEqual(times.filter(frameS => isKept(frameS, -TICK_S)).length)
      let at = 0
      for (const span of plan.spans) {
        const frames = plan.frames.slice(at, at += span.toFrame - span.fromFrame)
        for (const frame of frames) expect(Math.abs((frame.newS - span.newS[0]) - (frame.oldS - span.oldS[0]))).toBeLessThanOrEqual(TICK_S)
      }
      let lastKeyS = 0
      plan.frames.forEach((frame, index) => {
        if (index > 0) expect(frame.newS).toBeGreaterThan(plan.frames[index - 1]?.newS ?? Infinity)
        if (frame.isKey) {
          expect(frame.newS - lastKeyS).toBeLessThanOrEqual(KEY_GAP_MAX_S + TICK_S)
          lastKeyS = frame.newS
        }
      })
    }), { seed: 20260521, numRuns: 200 })
  })
})
