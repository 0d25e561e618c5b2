import { describe, expect, it } from 'vitest'
import { backOffMs, decideNextStep, isPassing, REFUSALS_MAX_COUNT } from '~/film/upload/retry'

const first = { failedCount: 1, refusedCount: 0 }

describe('decideNextStep', () => {
  it.each([500, 503, 429, 408])('tries again after %i', (status) => {
    expect(decideNextStep({ kind: 'status', status }, first, 1)).toEqual({ step: 'again', waitMs: 1000 })
  })

  it('asks the store after a lost connection, however often it is lost', () => {
    expect(decideNextStep({ kind: 'network' }, first, 1)).toEqual({ step: 'ask-store', waitMs: 1000 })
    expect(decideNextStep({ kind: 'network' }, { failedCount: 500, refusedCount: 0 }, 1)).toEqual({ step: 'ask-store', waitMs: 30_000 })
  })

  it('asks for a fresh address when one has run out, but not for ever', () => {
    expect(decideNextStep({ kind: 'status', status: 403 }, { failedCount: 1, refusedCount: 1 }, 1).step).toBe('ask-store')
    expect(decideNextStep({ kind: 'status', status: 403 }, { failedCount: 4, refusedCount: REFUSALS_MAX_COUNT }, 1)).toEqual({ step: 'give-up', reason: 'refused' })
  })

  it('does not count a bad line as refusals', () => {
    expect(decideNextStep({ kind: 'status', status: 403 }, { failedCount: 40, refusedCount: 1 }, 1).step).toBe('ask-store')
  })

  it('knows an upload that the store has dropped', () => {
    expect(decideNextStep({ kind: 'status', status: 404 }, first, 0)).toEqual({ step: 'give-up', reason: 'gone' })
  })

  it('does not repeat what the store will never take', () => {
    expect(decideNextStep({ kind: 'status', status: 413 }, first, 0)).toEqual({ step: 'give-up', reason: 'refused' })
  })
})

describe('isPassing', () => {
  it('holds for what the next try may not get', () => {
    expect([500, 502, 503, 504, 408, 429].every(isPassing)).toBe(true)
    expect([400, 401, 403, 404, 409, 413, 422].some(isPassing)).toBe(false)
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
