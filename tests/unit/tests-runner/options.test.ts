import { describe, expect, it } from 'vitest'
import { BadOptions, readOptions, STAGE_NAMES } from '#tests/runner/options'

describe('options of npm test', () => {
  it('runs every stage when told nothing', () => {
    expect(readOptions([])).toEqual({ tag: undefined, stages: [...STAGE_NAMES] })
  })

  it('builds before a stage that needs the build', () => {
    expect(readOptions(['server']).stages).toEqual(['build', 'server'])
    expect(readOptions(['unit']).stages).toEqual(['unit'])
  })

  it('[house.1] leaves out what carries no tags', () => {
    expect(readOptions(['--tag', 'house'])).toEqual({ tag: 'house', stages: ['unit', 'components', 'build', 'server', 'browser'] })
  })

  it.each([[['--tag']], [['--tag', 'shed']], [['everything']]])('refuses %j and says what there is', (given) => {
    expect(() => readOptions(given)).toThrow(BadOptions)
    expect(() => readOptions(given)).toThrow(/house/)
  })
})
