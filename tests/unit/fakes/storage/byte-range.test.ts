import { describe, expect, it } from 'vitest'
import { contentRange, readByteRanges } from '#fakes/storage/byte-range'

// RFC 7233, sections 2.1 and 4.2 (RFC 9110, section 14), for a body of 10,000 bytes; last positions there are inclusive.
const EXAMPLES: [header: string, ranges: [first: number, last: number][]][] = [
  ['bytes=0-499', [[0, 499]]],
  ['bytes=500-999', [[500, 999]]],
  ['bytes=-500', [[9500, 9999]]],
  ['bytes=9500-', [[9500, 9999]]],
  ['bytes=0-0,-1', [[0, 0], [9999, 9999]]],
]

describe('byte ranges', () => {
  it.each(EXAMPLES)('%s of 10,000 bytes', (header, expected) => {
    const reading = readByteRanges(header, 10_000)
    expect(reading).toEqual({ kind: 'ranges', ranges: expected.map(([first, last]) => ({ start: first, end: last + 1 })) })
  })

  it('clips a last position beyond the end, and a suffix longer than the body', () => {
    expect(readByteRanges('bytes=9000-20000', 10_000)).toEqual({ kind: 'ranges', ranges: [{ start: 9000, end: 10_000 }] })
    expect(readByteRanges('bytes=-20000', 10_000)).toEqual({ kind: 'ranges', ranges: [{ start: 0, end: 10_000 }] })
  })

  it.each([
    ['bytes=0-499', 'bytes 0-499/1234'],
    ['bytes=500-999', 'bytes 500-999/1234'],
    ['bytes=-500', 'bytes 734-1233/1234'],
  ])('%s of 1234 bytes is told as %s', (header, expected) => {
    const reading = readByteRanges(header, 1234)
    expect(reading.kind === 'ranges' ? reading.ranges.map(range => contentRange(range, 1234)) : reading).toEqual([expected])
  })

  it.each([['bytes=10000-', 10_000], ['bytes=-0', 10_000], ['bytes=0-', 0], ['bytes=-5', 0]])('%s of %i bytes cannot be satisfied', (header, length) => {
    expect(readByteRanges(header, length)).toEqual({ kind: 'unsatisfiable' })
  })

  it('drops a range that lies outside and keeps the others', () => {
    expect(readByteRanges('bytes=0-1,10000-10001', 10_000)).toEqual({ kind: 'ranges', ranges: [{ start: 0, end: 2 }] })
  })

  it.each([undefined, '', 'bytes=', 'bytes=-', 'bytes=5-2', 'bytes=a-b', 'frames=0-1', 'bytes=0-1,x'])('ignores %j', (header) => {
    expect(readByteRanges(header, 10_000)).toEqual({ kind: 'whole' })
  })
})
