import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { earnedLines, isBalanced, refundLines, saleLines, valuesOfSeries } from '#shared/domain/money/ledger'

const amount = fc.integer({ min: 0, max: 10_000_000 })
const percent = fc.integer({ min: 0, max: 100 })

describe('ledger lines', () => {
  it('balance, whatever the amount and the share', () => {
    fc.assert(fc.property(amount, percent, (value, share) => {
      for (const lines of [saleLines(value), refundLines(value), earnedLines(value, share)]) expect(isBalanced(lines)).toBe(true)
    }), { seed: 1 })
  })

  it('split 45.00 at 60 % into 27.00 and 18.00', () => {
    expect(earnedLines(4500, 60)).toEqual([
      { account: 'owed', amountMinor: 4500 }, { account: 'coach', amountMinor: -2700 }, { account: 'studio', amountMinor: -1800 },
    ])
  })

  it('round the coach\'s half unit up and leave the rest to the studio', () => {
    expect(earnedLines(5, 50)).toEqual([
      { account: 'owed', amountMinor: 5 }, { account: 'coach', amountMinor: -3 }, { account: 'studio', amountMinor: -2 },
    ])
  })

  it('have no line of nothing', () => {
    expect(earnedLines(100, 0)).toEqual([{ account: 'owed', amountMinor: 100 }, { account: 'studio', amountMinor: -100 }])
    expect(saleLines(0)).toEqual([])
  })

  it('refuse what is not money', () => {
    for (const wrong of [-1, 1.5, Number.NaN, 2 ** 53]) expect(() => saleLines(wrong)).toThrow(RangeError)
    for (const wrong of [-1, 101, 33.3]) expect(() => earnedLines(100, wrong)).toThrow(RangeError)
  })
})

describe('valuesOfSeries', () => {
  it('sum to the price and differ by one unit at most', () => {
    fc.assert(fc.property(amount, fc.integer({ min: 1, max: 50 }), (price, count) => {
      const values = valuesOfSeries(price, count)
      expect(values).toHaveLength(count)
      expect(values.reduce((sum, value) => sum + value, 0)).toBe(price)
      expect(Math.max(...values) - Math.min(...values)).toBeLessThanOrEqual(1)
    }), { seed: 1 })
  })

  it('gives 100.00 in three as 33.34, 33.33, 33.33', () => {
    expect(valuesOfSeries(10_000, 3)).toEqual([3334, 3333, 3333])
  })
})
