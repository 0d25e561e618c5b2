import { UnsoundFilm } from './reading.errors'

/** A box inside a piece of the file that is in memory; offsets count from the start of that piece. */
export interface Box {
  type: string
  /** First byte after the header. */
  body: number
  end: number
}

/** Apple and ffmpeg nest nine deep at most (moov, trak, mdia, minf, stbl, stsd, entry, its boxes, theirs). */
export const NESTING_MAX = 12
const BOX_MAX_COUNT = 20_000

/** Counts over a whole film, so that a million empty boxes end the reading and not the memory. */
export class BoxBudget {
  #count = 0

  spend(): void {
    if (++this.#count > BOX_MAX_COUNT)
      throw new UnsoundFilm('unreadable', 'too many boxes')
  }
}

/**
 * Boxes side by side between two offsets (ISO/IEC 14496-12, 4.2).
 *
 * Every size is held against its parent: a box that leaves it is `UnsoundFilm`, and so is one of size zero, which only
 * the file itself may end with and which would be read again for ever. Fewer than eight bytes left over are QuickTime's
 * terminator and are skipped.
 */
export function* boxesWithin(view: DataView, from: number, to: number, budget: BoxBudget): Generator<Box> {
  let at = from
  while (to - at >= 8) {
    budget.spend()
    const shortSize = view.getUint32(at)
    const isLong = shortSize === 1
    if (isLong && to - at < 16)
      throw new UnsoundFilm('unreadable', 'a box is cut short')
    const size = isLong ? readUint64(view, at + 8) : shortSize
    const body = at + (isLong ? 16 : 8)
    if (size < body - at || size > to - at)
      throw new UnsoundFilm('unreadable', 'a box does not fit where it stands')
    yield { type: readType(view, at + 4), body, end: at + size }
    at += size
  }
}

/** Four letters as Latin-1, since QuickTime's begin with ©. */
export function readType(view: DataView, at: number): string {
  return String.fromCharCode(view.getUint8(at), view.getUint8(at + 1), view.getUint8(at + 2), view.getUint8(at + 3))
}

/** Above 2^53 it is not exact, but far outside any file either way. */
export function readUint64(view: DataView, at: number): number {
  return view.getUint32(at) * 2 ** 32 + view.getUint32(at + 4)
}

/** Fails on a box too short for the fields that are about to be read from it. */
export function requireBody(box: Box, bytes: number): void {
  if (box.end - box.body < bytes)
    throw new UnsoundFilm('unreadable', `${box.type} is cut short`)
}
