import { describe, expect, it } from 'vitest'
import { readSwings } from '~/utils/kept-swings'

const SWING = { fromMs: 0, toMs: 900, contact: 'fat', flight: { start: 'left', curve: 'right', height: 'low' }, carryM: 130, surface: 'mat' }

describe('swings that a browser gave back', () => {
  it('come back as they were said', () => {
    expect(readSwings([SWING])).toEqual([SWING])
  })

  it('say nothing where nothing known was said', () => {
    expect(readSwings([{ fromMs: 1, toMs: 2, contact: 'perfect', flight: { start: 'left' }, surface: 7 }]))
      .toEqual([{ fromMs: 1, toMs: 2, contact: null, flight: null, carryM: null, surface: null }])
  })

  it.each([null, {}, [], 'swings', [{ fromMs: '1', toMs: 2 }], [SWING, 3]])('are none when they cannot be read: %j', (value) => {
    expect(readSwings(value)).toBeUndefined()
  })
})
