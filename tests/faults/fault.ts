/** A long test of what holds when something breaks. */
export interface Fault {
  /** What happens and what must hold afterwards, in a line. */
  about: string
  /** @returns what did not hold, a line each; none when all did. */
  run(tell: (line: string) => void): Promise<string[]>
  /** The same judgement on something broken on purpose. @returns what it found: nothing found means that the test is blind. */
  control(): Promise<string[]>
}

/** A number from 0 up to 1, the same row of them for the same seed (mulberry32), so that a failure can be played again. */
export function seededChance(seed: number): () => number {
  let state = seed
  return () => {
    state = (state + 0x6D2B79F5) | 0
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state)
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
}
