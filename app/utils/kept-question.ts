import type { Handedness } from '#shared/domain/clubs/handedness'

/** A question asked before there is an account, as it lies in this browser. */
export interface KeptQuestion {
  fields: Record<string, string>
  handedness: Handedness
}

const KEY = 'turfnote-question'
const KEPT_MS = 30 * 86_400_000

/** True when it is kept; private windows may refuse. */
export function keepQuestion({ fields, handedness }: KeptQuestion): boolean {
  try {
    localStorage.setItem(KEY, JSON.stringify({ fields, handedness, keptAtMs: Date.now() }))
    return true
  }
  catch {
    return false
  }
}

/** Undefined when nothing is kept, or so long ago that nobody comes back for it. */
export function findQuestion(): KeptQuestion | undefined {
  try {
    const kept: unknown = JSON.parse(localStorage.getItem(KEY) ?? 'null')
    if (typeof kept !== 'object' || kept === null || !('fields' in kept) || !('keptAtMs' in kept)) return undefined
    const { fields, keptAtMs } = kept
    if (typeof fields !== 'object' || fields === null || typeof keptAtMs !== 'number' || Date.now() - keptAtMs > KEPT_MS) return undefined
    return {
      fields: Object.fromEntries(Object.entries(fields).filter((entry): entry is [string, string] => typeof entry[1] === 'string')),
      handedness: 'handedness' in kept && kept.handedness === 'left' ? 'left' : 'right',
    }
  }
  catch {
    return undefined
  }
}

export function forgetQuestion(): void {
  try {
    localStorage.removeItem(KEY)
  }
  catch {
    // Nothing was kept.
  }
}
