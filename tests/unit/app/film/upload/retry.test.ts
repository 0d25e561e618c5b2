import { describe, expect, it } from 'vitest'
import { backOffMs, decideNextStep, REFUSALS_MAX_COUNT, TRIES_MAX_COUNT } from '~/film/upload/retry'

describe('decideNextStep', () => {
  it.each([500, 503, 429, 408])('tries again after %i', (status) => {
    expect(decideNextStep({ kind: 'status', status }, 1, 1)).toEqual({ step: 'again', waitMs: 1000 })
  })

  it('bridges a lost connection for some minutes, then says so', () => {
    expect(decideNextStep({ kind: 'network' }, TRIES_MAX_COUNT - 1, 0).step).toBe('again')
    expect(decideNextStep({ kind: 'network' }, TRIES_MAX_COUNT, 0)).toEqual({ step: 'give-up', reason: 'unreachable' })
  })

  it('asks for a fresh address when one has run out, but not for ever', () => {
    expect(decideNextStep({ kind: 'status', status: 403 }, 1, 1).step).toBe('fresh-address')
    expect(decideNextStep({ kind: 'status', status: 403 }, REFUSALS_MAX_COUNT, 1)).toEqual({ step: 'give-up', reason: 'refused' })
  })

  it('knows an upload that the store has dropped', () => {
    expect(decideNextStep({ kind: 'status', status: 404 }, 1, 0)).toEqual({ step: 'give-up', reason: 'gone' })
  })

  it('does not repeat what the store will never take', () => {
    expect(decideNextStep({ kind: 'status', status: 413 }, 1, 0)).toEqual({ step: 'give-up', reason: 'refused' })
  })
})

describe('backOffMs', () => {
  it('doubles from a second to half a minute', () => {
    expect([1, 2, 3, 4, 5, 6, 7].map(failed => backOffMs(failed, 1))).toEqual([1000, 2000, 4000, 8000, 16000, 30000, 30000])
  })

  it('spreads over the upper half', () => {
    expect(backOffMs(1, 0)).toBe(500)
    expect(backOffMs(1, 0.5)).toBe(750)
    expect(backOffMs(1, 7)).toBe(1000)
  })
})
