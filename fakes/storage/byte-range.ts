/** Half-open: `start` is the first byte, `end` the one after the last. */
export interface ByteRange {
  start: number
  end: number
}

/** `whole` when there is no range to obey; `unsatisfiable` when the header is sound but no byte of it exists. */
export type RangeReading
  = | { kind: 'whole' }
    | { kind: 'unsatisfiable' }
    | { kind: 'ranges', ranges: ByteRange[] }

/**
 * Reads a Range header against a body of `lengthBytes` (RFC 9110, section 14). A last position beyond the end is
 * clipped, a suffix longer than the body is the body, a header that does not parse or uses another unit is ignored
 * (14.2), ranges that lie wholly outside are dropped, and if none is left the request is unsatisfiable.
 */
export function readByteRanges(header: string | undefined, lengthBytes: number): RangeReading {
  const specs = /^bytes=(.+)$/i.exec(header?.trim() ?? '')?.[1]?.split(',').map(spec => spec.trim())
  if (!specs) return { kind: 'whole' }
  const ranges: ByteRange[] = []
  for (const spec of specs) {
    const range = readSpec(spec, lengthBytes)
    if (range === undefined) return { kind: 'whole' }
    if (range.start < range.end) ranges.push(range)
  }
  return ranges.length === 0 ? { kind: 'unsatisfiable' } : { kind: 'ranges', ranges }
}

/** An empty range stands for one outside the body; undefined for one that is not a range at all. */
function readSpec(spec: string, lengthBytes: number): ByteRange | undefined {
  const match = /^(\d*)-(\d*)$/.exec(spec)
  const [, first = '', last = ''] = match ?? []
  if (first === '' && last === '') return undefined
  if (first === '') return { start: Math.max(0, lengthBytes - Number(last)), end: lengthBytes }
  if (last !== '' && Number(last) < Number(first)) return undefined
  return { start: Number(first), end: last === '' ? lengthBytes : Math.min(Number(last) + 1, lengthBytes) }
}

/** The Content-Range of a partial answer, whose last position is inclusive. */
export function contentRange(range: ByteRange, lengthBytes: number): string {
  return `bytes ${range.start}-${range.end - 1}/${lengthBytes}`
}
