import { describe, expect, it } from 'vitest'
import type { Outcome } from '#tests/runner/outcome'
import { hasTag, reportTag } from '#tests/runner/tags'

function test(title: string, hasPassed = true): Outcome {
  return { title, file: 'a.test.ts', hasPassed, message: '' }
}

const LINES = [
  { number: '1', about: 'the first' },
  { number: '2', about: 'the second', shownByHand: 'looked at' },
]

describe('[house.1] tags', () => {
  it('counts the tests of a line and those that failed', () => {
    const { lines, missing } = reportTag('shed', LINES, [test('[shed.1] a'), test('[shed.1] b › c', false)])
    expect(lines[0]).toContain('[shed.1]')
    expect(lines[0]).toContain('2 tests, 1 FAILED')
    expect(missing).toEqual([])
  })

  it('fails a line that no test carries', () => {
    const { lines, missing } = reportTag('shed', LINES, [])
    expect(lines[0]).toContain('NO TEST')
    expect(missing.map(outcome => [outcome.title, outcome.hasPassed])).toEqual([['[shed.1]', false]])
  })

  it('lets a line that is shown by hand have no test, and says how it is shown', () => {
    const { lines } = reportTag('shed', LINES, [test('[shed.1] a')])
    expect(lines[1]).toContain('by hand (looked at)')
  })

  it('fails a number that the table does not know: a slip of the hand would hide a test', () => {
    const { missing } = reportTag('shed', LINES, [test('[shed.1] a'), test('[shed.11] a')])
    expect(missing.map(outcome => outcome.title)).toEqual(['[shed.11]'])
  })

  it('knows a tag by its whole name', () => {
    expect(hasTag(test('[house.1] a'), 'house')).toBe(true)
    expect(hasTag(test('[greenhouse.1] a'), 'house')).toBe(false)
    expect(hasTag(test('house.1 a'), 'house')).toBe(false)
  })
})
