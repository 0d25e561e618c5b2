/** Which bytes go in which part, and how much of a file has arrived. No network, no file: numbers only. */

export interface PartRange {
  /** Counts from 1, as the store counts. */
  number: number
  fromByte: number
  /** One past the last byte. */
  toByte: number
}

/**
 * Cuts a file into parts of `partBytes`; the last one holds what is left.
 * @returns parts in order; none for an empty file
 * @throws RangeError when `fileBytes` is negative or `partBytes` is not a whole number above 0
 */
export function planParts(fileBytes: number, partBytes: number): PartRange[] {
  if (!Number.isInteger(partBytes) || partBytes < 1) throw new RangeError('A part holds at least one byte.')
  if (!Number.isInteger(fileBytes) || fileBytes < 0) throw new RangeError('A file has a whole number of bytes.')
  const count = Math.ceil(fileBytes / partBytes)
  return Array.from({ length: count }, (_, index) => ({
    number: index + 1,
    fromByte: index * partBytes,
    toByte: Math.min((index + 1) * partBytes, fileBytes),
  }))
}

/** Parts that the store does not have yet, in order. */
export function missingParts(parts: readonly PartRange[], doneNumbers: readonly number[]): PartRange[] {
  const done = new Set(doneNumbers)
  return parts.filter(part => !done.has(part.number))
}

/**
 * Bytes that have left this device: whole parts that the store has, and the started part of those on their way.
 * @param sentByNumber bytes sent so far of a part, by its number; counted at most once and never above the part's size
 */
export function countSentBytes(
  parts: readonly PartRange[],
  doneNumbers: readonly number[],
  sentByNumber: ReadonlyMap<number, number>,
): number {
  const done = new Set(doneNumbers)
  return parts.reduce((sum, part) => {
    const size = part.toByte - part.fromByte
    if (done.has(part.number)) return sum + size
    // A browser counts its own framing too, so a part on its way can report more than it holds.
    return sum + Math.min(sentByNumber.get(part.number) ?? 0, size)
  }, 0)
}
