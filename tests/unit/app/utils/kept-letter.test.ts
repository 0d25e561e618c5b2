import { describe, expect, it } from 'vitest'
import type { DraftView, LetterDraft } from '#shared/types/reviews'
import { isSameLetter, judgeKeptLetter, listChangedParts, parseKeptLetter } from '~/utils/kept-letter'

const letter: LetterDraft = {
  title: 'Why the heavy ones come in twos', leaveAlone: '', saw: 'The grip end hangs behind.', why: '', howSure: 'sure',
  oneChange: '', drillTitle: '', drillSteps: '', drillDose: '', caution: '',
}
const server: DraftView = { version: 4, letter, savedAtMs: 1000 }
const kept = (baseVersion: number, saw: string) => ({ baseVersion, letter: { ...letter, saw }, keptAtMs: 2000 })

describe('judgeKeptLetter', () => {
  it('has nothing to do without a kept letter, or when it says the same', () => {
    expect(judgeKeptLetter(undefined, server)).toBe('nothing')
    expect(judgeKeptLetter(kept(2, letter.saw), server)).toBe('nothing')
  })

  it('restores words that only lacked saving', () => {
    expect(judgeKeptLetter(kept(4, 'More.'), server)).toBe('restore')
  })

  it('lets the coach choose when the letter went on elsewhere', () => {
    expect(judgeKeptLetter(kept(3, 'More.'), server)).toBe('choose')
  })
})

describe('listChangedParts', () => {
  it('names what differs in the order of the letter', () => {
    expect(listChangedParts(letter, { ...letter, caution: 'Warm up.', saw: '' })).toEqual(['saw', 'caution'])
    expect(isSameLetter(letter, { ...letter })).toBe(true)
    expect(isSameLetter(letter, { ...letter, howSure: 'a_guess' })).toBe(false)
  })
})

describe('parseKeptLetter', () => {
  it('reads back what was kept', () => {
    expect(parseKeptLetter(JSON.stringify(kept(4, 'More.')))).toEqual(kept(4, 'More.'))
  })

  it.each([null, '', '{', '[]', 'null', '{"baseVersion":1}', JSON.stringify({ ...kept(1, ''), letter: { ...letter, saw: 3 } }),
    JSON.stringify({ ...kept(1, ''), letter: { ...letter, howSure: 'perhaps' } })])('takes %s for nothing', (json) => {
    expect(parseKeptLetter(json)).toBeUndefined()
  })
})
