import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { firstLines } from '#shared/domain/review/first-lines'
import type { Letter } from '#shared/domain/review/letter'

const blank: Letter = { leaveAlone: '', saw: '', why: '', howSure: 'sure', oneChange: '', drillTitle: '', drillSteps: '', drillDose: '', caution: '' }

describe('firstLines', () => {
  it('begins where the letter begins and goes on over its parts', () => {
    expect(firstLines({ ...blank, leaveAlone: 'Good set-up.', saw: 'The club\nis late.' }, 100)).toBe('Good set-up. The club is late.')
    expect(firstLines({ ...blank, saw: 'The club is late.' }, 100)).toBe('The club is late.')
  })
  it('cuts after a whole word', () => {
    const saw = { ...blank, saw: 'one two, three four' }
    expect(firstLines(saw, 19)).toBe('one two, three four')
    expect(firstLines(saw, 18)).toBe('one two, three…')
    expect(firstLines(saw, 15)).toBe('one two, three…')
    expect(firstLines(saw, 14)).toBe('one two…')
  })
  it('cuts a word that alone is too long, never a sign in two', () => {
    expect(firstLines({ ...blank, saw: 'abcdefgh' }, 5)).toBe('abcd…')
    expect(firstLines({ ...blank, saw: '⛳🏌️🏌️🏌️🏌️' }, 3)).toBe('⛳…')
  })
  it('leaves out the signs of Markdown', () => {
    const saw = '## Seen\n- **Late** by _far_, see [the still](https://a.example/1)\n> `quoted`\n\n1. first\n![a still](x.png)'
    expect(firstLines({ ...blank, saw }, 200)).toBe('Seen Late by far, see the still quoted first')
  })
  it('leaves arithmetic alone', () => {
    expect(firstLines({ ...blank, saw: '2 * 3 cm and 4 * 5 cm' }, 100)).toBe('2 * 3 cm and 4 * 5 cm')
  })
  it('is empty for an empty letter and for no room', () => {
    expect(firstLines(blank, 50)).toBe('')
    for (const maxChars of [0, -1, Number.NaN, 0.5]) expect(firstLines({ ...blank, saw: 'abc' }, maxChars)).toBe('')
    expect(firstLines({ ...blank, saw: 'abc' }, 1)).toBe('…')
  })
  it('never exceeds the limit', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary' }), fc.string(), fc.integer({ min: 1, max: 40 }), (saw, why, maxChars) => {
      const line = firstLines({ ...blank, saw, why }, maxChars)
      expect(line.length).toBeLessThanOrEqual(maxChars)
      expect(line).not.toMatch(/\n/)
    }), { seed: 3, numRuns: 300 })
  })
})
