import type { DraftView, HowSure, LetterDraft } from '#shared/types/reviews'

/** A letter as this device keeps it: its words, and the server's version they were written on. */
export interface KeptLetter {
  baseVersion: number
  letter: LetterDraft
  keptAtMs: number
}

/** What to do with a kept letter when its review is opened again. */
export type KeptLetterFate = 'nothing' | 'restore' | 'choose'

const TEXT_PARTS = ['title', 'leaveAlone', 'saw', 'why', 'oneChange', 'drillTitle', 'drillSteps', 'drillDose', 'caution'] as const
const ALL_PARTS = [...TEXT_PARTS, 'howSure'] as const satisfies readonly (keyof LetterDraft)[]

/** True when no part differs. */
export function isSameLetter(a: LetterDraft, b: LetterDraft): boolean {
  return listChangedParts(a, b).length === 0
}

/** Names of the parts that differ, in the order of the letter. */
export function listChangedParts(a: LetterDraft, b: LetterDraft): (keyof LetterDraft)[] {
  return ALL_PARTS.filter(part => a[part] !== b[part])
}

/**
 * `restore` when the kept words only lack saving; `choose` when the server's letter went on without them meanwhile.
 * A letter that says the same is `nothing`, whatever its version.
 */
export function judgeKeptLetter(kept: KeptLetter | undefined, server: DraftView): KeptLetterFate {
  if (kept === undefined || isSameLetter(kept.letter, server.letter)) return 'nothing'
  return kept.baseVersion === server.version ? 'restore' : 'choose'
}

/** Reads what the device kept; undefined for nothing, and for anything that is not a letter of this shape. */
export function parseKeptLetter(json: string | null): KeptLetter | undefined {
  if (json === null) return undefined
  let value: unknown
  try {
    value = JSON.parse(json)
  }
  catch {
    return undefined
  }
  const baseVersion = readKey(value, 'baseVersion')
  const keptAtMs = readKey(value, 'keptAtMs')
  const letter = readLetter(readKey(value, 'letter'))
  if (typeof baseVersion !== 'number' || typeof keptAtMs !== 'number' || letter === undefined) return undefined
  return { baseVersion, keptAtMs, letter }
}

function readLetter(value: unknown): LetterDraft | undefined {
  const howSure = readKey(value, 'howSure')
  if (!isHowSure(howSure)) return undefined
  const letter: LetterDraft = {
    title: '', leaveAlone: '', saw: '', why: '', howSure, oneChange: '', drillTitle: '', drillSteps: '', drillDose: '', caution: '',
  }
  for (const part of TEXT_PARTS) {
    const text = readKey(value, part)
    if (typeof text !== 'string') return undefined
    letter[part] = text
  }
  return letter
}

function isHowSure(value: unknown): value is HowSure {
  return value === 'sure' || value === 'fairly_sure' || value === 'a_guess'
}

function readKey(value: unknown, key: string): unknown {
  return typeof value === 'object' && value !== null ? Reflect.get(value, key) : undefined
}
