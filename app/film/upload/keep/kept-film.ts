import type { ClipBrief } from '#shared/types/reviews'

/** A film that lies on this device until it is sent, so that a reload or a closed page does not end its way. */
export interface KeptFilm {
  clipId: string
  reviewId: string
  /** Whoever chose it: another person at the same device does not send it. */
  viewerId: string
  clip: ClipBrief
  partBytes: number
  keptAtMs: number
  /** What this device knows to be in the store; the store itself is asked before anything is sent. */
  doneNumbers: number[]
  /** True once every part lies here or in the store. */
  isWhole: boolean
  /** The person told it to wait, which a reload must not undo. */
  isPaused: boolean
}

/** What this device knows of one part; written after its bytes, so that a part cut short by a closed page does not count. */
export interface KeptPart {
  clipId: string
  /** Counts from 1. */
  number: number
  bytes: number
  /** What `weigh` said of the part of the chosen file. */
  sha256: string
  /** False for one that was in the store before it was copied: only its weight is known here. */
  isCopied: boolean
  /** The bytes themselves, where the browser has no private files. */
  body: Blob | undefined
}

/** After this long the store has given an unfinished clip up, so that the copy is of no use. */
export const KEPT_MS = 24 * 60 * 60 * 1000

/** For what comes out of a database that an older version of this page may have written. */
export function isKeptFilm(value: unknown): value is KeptFilm {
  return hasTypes(value, {
    clipId: 'string', reviewId: 'string', viewerId: 'string', clip: 'object', partBytes: 'number', keptAtMs: 'number',
    doneNumbers: 'object', isWhole: 'boolean', isPaused: 'boolean',
  })
}

export function isKeptPart(value: unknown): value is KeptPart {
  return hasTypes(value, { clipId: 'string', number: 'number', bytes: 'number', sha256: 'string', isCopied: 'boolean' })
}

function hasTypes(value: unknown, types: Record<string, string>): boolean {
  return typeof value === 'object' && value !== null
    && Object.entries(types).every(([key, type]) => typeof Reflect.get(value, key) === type && Reflect.get(value, key) !== null)
}
