export const HOW_SURE = ['sure', 'fairly_sure', 'a_guess'] as const
export type HowSure = typeof HOW_SURE[number]

export const HOW_SURE_WORDS: Readonly<Record<HowSure, string>> = {
  sure: 'I am sure of this',
  fairly_sure: 'I am fairly sure of this',
  a_guess: 'This is a guess',
}

/** The answer as written; texts are Markdown but for the one change and the drill's title and dose, which are plain lines. */
export interface Letter {
  leaveAlone: string
  saw: string
  why: string
  howSure: HowSure
  oneChange: string
  drillTitle: string
  drillSteps: string
  drillDose: string
  caution: string
}

/** The fields that hold text. */
export type LetterField = Exclude<keyof Letter, 'howSure'>

export type LetterPartKey = 'leave-alone' | 'saw' | 'why' | 'one-change' | 'drill' | 'caution'

export interface LetterPart {
  key: LetterPartKey
  heading: string
  fields: readonly LetterField[]
}

/** The parts in the order in which a letter is written and read. */
export const LETTER_PARTS: readonly LetterPart[] = [
  { key: 'leave-alone', heading: 'What to leave alone', fields: ['leaveAlone'] },
  { key: 'saw', heading: 'What I saw', fields: ['saw'] },
  { key: 'why', heading: 'Why it happens', fields: ['why'] },
  { key: 'one-change', heading: 'One change', fields: ['oneChange'] },
  { key: 'drill', heading: 'Your drill', fields: ['drillTitle', 'drillSteps', 'drillDose'] },
  { key: 'caution', heading: 'Take care', fields: ['caution'] },
]

/** All text fields in the order of the letter. */
export const LETTER_FIELDS: readonly LetterField[] = LETTER_PARTS.flatMap(part => part.fields)

/** Most characters a field may hold, as `String.length` and zod count them. */
export const LETTER_MAX_LENGTHS: Readonly<Record<LetterField, number>> = {
  leaveAlone: 4000,
  saw: 8000,
  why: 6000,
  oneChange: 200,
  drillTitle: 120,
  drillSteps: 6000,
  drillDose: 200,
  caution: 3000,
}

export interface LetterProblem {
  field: LetterField
  message: string
}

const MISSING: Readonly<Partial<Record<LetterField, string>>> = {
  saw: 'Say what you saw.',
  why: 'Say why it happens.',
  oneChange: 'Name the one change.',
  drillTitle: 'Give the drill a name.',
  drillSteps: 'Write the steps of the drill.',
  caution: 'Say what to be careful about.',
}

/** A sentence's end with another beginning after it; a lower-case letter or a digit goes on with the same one ("approx. 3 cm"). */
const SECOND_SENTENCE = /[.!?…]["'”’)\]*_]*\s+["'“‘([*_]*\p{Lu}/u
const SECOND_LINE = /\S\s*\n\s*\S/

/**
 * What still keeps a letter from being sent, in the order of the letter, one problem a field; empty when it can go. Required:
 * what I saw, why, the one change, the drill's title and steps, the caution; blanks alone do not count. What to leave alone
 * and the dose may be empty. The one change is one sentence on one line, told by a mark that ends a sentence with a capital after it,
 * so a capital after an abbreviation ("St. Andrews") is taken for a second one.
 */
export function letterProblems(letter: Letter): LetterProblem[] {
  return LETTER_FIELDS.flatMap((field) => {
    const message = fieldProblem(field, letter[field])
    return message ? [{ field, message }] : []
  })
}

/** Whether a text is at most one sentence on one line; an empty text is. */
export function isOneSentence(text: string): boolean {
  return !SECOND_SENTENCE.test(text) && !SECOND_LINE.test(text)
}

function fieldProblem(field: LetterField, text: string): string | null {
  if (text.trim() === '') return MISSING[field] ?? null
  const maxLength = LETTER_MAX_LENGTHS[field]
  if (text.length > maxLength) return `At most ${maxLength} characters.`
  if (field === 'oneChange' && !isOneSentence(text)) return 'Keep the one change to one sentence.'
  return null
}
