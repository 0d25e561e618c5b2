import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { decodeCursor, encodeCursor, toPage } from '#server/features/cursor'
import { newId } from '#server/ids'

describe('cursor', () => {
  it('comes back as it went in', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 2 ** 45 }), (atMs) => {
      const cursor = { atMs, id: newId(atMs) }
      expect(decodeCursor(encodeCursor(cursor))).toEqual(cursor)
    }), { seed: 7, numRuns: 200 })
  })

  it('can stand in an address', () => {
    expect(encodeCursor({ atMs: Date.UTC(2026, 4, 19), id: newId(0) })).toMatch(/^[A-Za-z0-9_-]+$/)
  })

  const id = newId(1)
  const encoded = (text: string) => Buffer.from(text).toString('base64url')
  it.each([
    ['nothing', ''],
    ['words', 'next please'],
    ['no id', encoded('5,')],
    ['another kind of id', encoded('5,17')],
    ['no time', encoded(`,${id}`)],
    ['a time that is none', encoded(`NaN,${id}`)],
    ['a time in another spelling', encoded(`05,${id}`)],
    ['a time beyond whole numbers', encoded(`9999999999999999,${id}`)],
    ['something behind', encoded(`5,${id} or 1=1`)],
    ['another spelling of the same', `${encoded(`5,${id}`)}=`],
  ])('refuses %s as a field', (_what, text) => {
    expect(() => decodeCursor(text)).toThrow(expect.objectContaining({ kind: 'invalid', fields: { cursor: expect.any(String) } }))
  })

  it('refuses any other text in the same way', () => {
    fc.assert(fc.property(fc.string({ maxLength: 200 }), (text) => {
      expect(() => decodeCursor(text)).toThrow(expect.objectContaining({ code: 'invalid-fields' }))
    }), { seed: 7, numRuns: 500 })
  })
})

describe('page', () => {
  const rows = [3, 2, 1].map(atMs => ({ atMs, id: newId(atMs) }))
  const page = (limit: number) => toPage(rows.slice(0, limit + 1), limit, row => row.atMs, row => row)

  it('shows up to the limit and says where the next one begins', () => {
    const { items, nextCursor } = page(2)
    expect(items).toEqual([3, 2])
    expect(decodeCursor(nextCursor ?? '')).toEqual(rows[1])
  })

  it('has no next one after the last row', () => {
    expect(page(3)).toEqual({ items: [3, 2, 1], nextCursor: null })
    expect(toPage([], 25, row => row, () => ({ atMs: 0, id: '' }))).toEqual({ items: [], nextCursor: null })
  })
})
