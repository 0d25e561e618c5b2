import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import type { SpanS } from '~/film/prepare/clip-facts'
import { addSwing, fitSwings, isTooLong, keptS, limitsOf, moveEnd, swingRange } from '~/utils/swing-spans'

const RANGE: SpanS = [0, 10]

describe('brackets on a clip', () => {
  it('begin and end with the clip, whatever its first frame is called', () => {
    expect(swingRange({ frameTimesS: [0.5, 0.6], durationMs: 2000 })).toEqual([0.5, 2.5])
  })

  it('stand in order, within the clip, none over another, six at most', () => {
    expect(fitSwings([[6, 12], [1, 3], [2, 5]], RANGE)).toEqual([[1, 3], [3, 5], [6, 10]])
    expect(fitSwings(Array.from({ length: 8 }, (_, at): SpanS => [at, at + 1]), RANGE)).toHaveLength(6)
  })

  it('go as far as their neighbour and their other end allow', () => {
    const swings: SpanS[] = [[1, 3], [4, 6]]
    expect(limitsOf(swings, 1, 0, RANGE)).toEqual([3, 5.7])
    expect(limitsOf(swings, 0, 1, RANGE)).toEqual([1.3, 4])
    expect(moveEnd(swings, 0, 1, 9, RANGE)).toEqual([[1, 4], [4, 6]])
    expect(moveEnd(swings, 0, 0, 2.9, RANGE)).toEqual([[2.7, 3], [4, 6]])
  })

  it('come in the widest gap, until there are six or no room', () => {
    expect(addSwing([[0, 2]], RANGE)).toEqual([[0, 2], [4.5, 7.5]])
    expect(addSwing([], RANGE)).toEqual([[3.5, 6.5]])
    expect(addSwing([[0, 10]], RANGE)).toBeUndefined()
    expect(addSwing(Array.from({ length: 6 }, (_, at): SpanS => [at, at + 0.5]), RANGE)).toBeUndefined()
  })

  it('are too long together past a minute', () => {
    expect(keptS([[0, 2], [5, 6.5]])).toBe(3.5)
    expect(isTooLong([[0, 30], [40, 70]])).toBe(false)
    expect(isTooLong([[0, 30], [40, 70.1]])).toBe(true)
  })

  it('stay in order however they are pulled about', () => {
    const pull = fc.record({ index: fc.nat(5), end: fc.constantFrom<0 | 1>(0, 1), toS: fc.double({ min: -5, max: 15, noNaN: true }) })
    fc.assert(fc.property(fc.array(pull, { maxLength: 40 }), (pulls) => {
      let swings: SpanS[] = addSwing(addSwing([[1, 2]], RANGE) ?? [], RANGE) ?? []
      for (const { index, end, toS } of pulls) swings = moveEnd(swings, index % swings.length, end, toS, RANGE)
      const edges = [0, ...swings.flat(), 10]
      expect(edges.every((atS, at) => at === 0 || atS >= (edges[at - 1] ?? 0) - 1e-9)).toBe(true)
      expect(swings.every(([fromS, toS]) => toS - fromS >= 0.3 - 1e-9)).toBe(true)
    }))
  })
})
