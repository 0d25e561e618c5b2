import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { countSentBytes, missingParts, planParts } from '~/film/upload/plan'

const MIB = 1024 * 1024

describe('planParts', () => {
  it('cuts 20 MiB into 8, 8 and 4', () => {
    expect(planParts(20 * MIB, 8 * MIB)).toEqual([
      { number: 1, fromByte: 0, toByte: 8 * MIB },
      { number: 2, fromByte: 8 * MIB, toByte: 16 * MIB },
      { number: 3, fromByte: 16 * MIB, toByte: 20 * MIB },
    ])
  })

  it('needs no second part for exactly one', () => {
    expect(planParts(8 * MIB, 8 * MIB)).toHaveLength(1)
  })

  it('has nothing to send of an empty file', () => {
    expect(planParts(0, 8 * MIB)).toEqual([])
  })

  it('refuses sizes that are none', () => {
    expect(() => planParts(1, 0)).toThrow(RangeError)
    expect(() => planParts(-1, 8)).toThrow(RangeError)
    expect(() => planParts(1.5, 8)).toThrow(RangeError)
  })

  it('covers every byte once, in order', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 5000 }), fc.integer({ min: 1, max: 700 }), (bytes, partBytes) => {
      const parts = planParts(bytes, partBytes)
      expect(parts[0]?.fromByte).toBe(0)
      expect(parts.at(-1)?.toByte).toBe(bytes)
      parts.forEach((part, index) => {
        expect(part.number).toBe(index + 1)
        expect(part.toByte).toBeGreaterThan(part.fromByte)
        if (index > 0) expect(part.fromByte).toBe(parts[index - 1]?.toByte)
      })
    }), { seed: 20260521, numRuns: 200 })
  })
})

describe('what has arrived', () => {
  const parts = planParts(20, 8)

  it('leaves the parts that the store lacks', () => {
    expect(missingParts(parts, [2]).map(part => part.number)).toEqual([1, 3])
    expect(missingParts(parts, [1, 2, 3])).toEqual([])
  })

  it('counts whole parts and what is on its way', () => {
    expect(countSentBytes(parts, [1], new Map([[2, 3]]))).toBe(11)
  })

  it('counts no part twice and none above its size', () => {
    expect(countSentBytes(parts, [1], new Map([[1, 8], [3, 900]]))).toBe(12)
  })
})
