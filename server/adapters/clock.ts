import { readFileSync } from 'node:fs'

/** The one source of the present moment for everything that Turfnote decides. SDKs keep the machine's time. */
export interface Clock {
  /** UTC epoch milliseconds. */
  nowMs(): number
}

/**
 * The machine's clock, moved ahead by the milliseconds that `offsetFile` holds, when one is named.
 * The file is read at every call, so that a rehearsal can move a running server; a missing or broken file moves nothing.
 */
export function createClock(offsetFile: string | undefined): Clock {
  if (offsetFile === undefined) return { nowMs: () => Date.now() }
  return { nowMs: () => Date.now() + readOffsetMs(offsetFile) }
}

function readOffsetMs(path: string): number {
  try {
    const offsetMs = Number(readFileSync(path, 'utf8'))
    return Number.isFinite(offsetMs) ? Math.trunc(offsetMs) : 0
  }
  catch {
    return 0
  }
}
