import { describe, expect, it } from 'vitest'
import type { Letter, LetterField } from '#shared/domain/review/letter'
import {
  HOW_SURE, HOW_SURE_WORDS, LETTER_FIELDS, LETTER_MAX_LENGTHS, LETTER_PARTS, isOneSentence, letterProblems,
} from '#shared/domain/review/letter'

const letter: Letter = {
  leaveAlone: 'Your set-up is in good order.',
  saw: 'The end of your grip hangs 24 cm behind the ball.',
  why: 'Your hands slow down before the ball.',
  howSure: 'fairly_sure',
  oneChange: 'Keep the grip end travelling past the ball before the wrists let go.',
  drillTitle: 'Low punch, level to level',
  drillSteps: '1. Start with the handle slightly ahead.\n2. Swing until the shaft is level.',
  drillDose: '4 sessions a week, 10 minutes',
  caution: 'Stop at pain.',
}

describe('LETTER_PARTS', () => {
  it('has every text field once, in the order of reading', () => {
    expect(LETTER_PARTS.map(part => part.key)).toEqual(['leave-alone', 'saw', 'why', 'one-change', 'drill', 'caution'])
    expect(LETTER_FIELDS).toEqual(['leaveAlone', 'saw', 'why', 'oneChange', 'drillTitle', 'drillSteps', 'drillDose', 'caution'])
    expect([...LETTER_FIELDS].sort()).toEqual(Object.keys(letter).filter(key => key !== 'howSure').sort())
  })
  it('has words for how sure', () => {
    expect(HOW_SURE.map(key => HOW_SURE_WORDS[key])).toEqual(['I am sure of this', 'I am fairly sure of this', 'This is a guess'])
  })
})

describe('letterProblems', () => {
  it('finds none in a letter that can go, even without what to leave alone and the dose', () => {
    expect(letterProblems(letter)).toEqual([])
    expect(letterProblems({ ...letter, leaveAlone: '', drillDose: ' ' })).toEqual([])
  })
  it('names all that is missing, in the order of the letter', () => {
    const empty: Letter = { leaveAlone: '', saw: '', why: ' ', howSure: 'sure', oneChange: '\n', drillTitle: '', drillSteps: '\t', drillDose: '', caution: '' }
    const problems = letterProblems(empty)
    expect(problems.map(problem => problem.field)).toEqual(['saw', 'why', 'oneChange', 'drillTitle', 'drillSteps', 'caution'])
    expect(problems.every(problem => problem.message.endsWith('.'))).toBe(true)
  })
  it.each(LETTER_FIELDS)('holds %s to its length', (field: LetterField) => {
    const maxLength = LETTER_MAX_LENGTHS[field]
    expect(letterProblems({ ...letter, [field]: 'a'.repeat(maxLength) })).toEqual([])
    expect(letterProblems({ ...letter, [field]: 'a'.repeat(maxLength + 1) })).toEqual([{ field, message: `At most ${maxLength} characters.` }])
  })
  it('gives the one change 200 characters and one sentence', () => {
    expect(LETTER_MAX_LENGTHS.oneChange).toBe(200)
    expect(letterProblems({ ...letter, oneChange: 'Turn first. Then hit.' })).toEqual([{ field: 'oneChange', message: 'Keep the one change to one sentence.' }])
  })
})

describe('isOneSentence', () => {
  it.each(['', 'Turn', 'Turn first.', 'Stand approx. 3 cm closer.', 'Hang 7.5 cm behind, i.e. less than now', 'Let "hit." be the last word, then hold', 'Ready? go!'])('%j is', (text) => {
    expect(isOneSentence(text)).toBe(true)
  })
  it.each(['Turn. Hit.', 'Turn! "Then hit"', '**Turn.** Then hit.', 'Turn? Über den Ball.', 'Turn\nhit', 'Turn (first). (Then hit)', 'Turn…  Hit'])('%j is not', (text) => {
    expect(isOneSentence(text)).toBe(false)
  })
})
