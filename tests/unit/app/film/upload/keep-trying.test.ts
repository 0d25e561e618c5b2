import { describe, expect, it, vi } from 'vitest'
import { keepTrying } from '~/film/upload/keep-trying'
import type { PartFailure } from '~/film/upload/retry'

class Failed extends Error {
  constructor(readonly failure: PartFailure) {
    super('failed')
  }
}

const lost = new Failed({ kind: 'network' })
const busy = new Failed({ kind: 'status', status: 503 })
const refused = new Failed({ kind: 'status', status: 403 })
const readFailure = (error: unknown): PartFailure => error instanceof Failed ? error.failure : { kind: 'status', status: 500 }
const ports = { wait: async () => {}, random: () => 0 }
const never = new AbortController().signal

describe('keepTrying', () => {
  it('bridges a lost connection and a busy server', async () => {
    const act = vi.fn().mockRejectedValueOnce(lost).mockRejectedValueOnce(busy).mockResolvedValue('read')
    expect(await keepTrying(act, readFailure, ports, never)).toBe('read')
    expect(act).toHaveBeenCalledTimes(3)
  })

  it('hands on a definite answer at once', async () => {
    const act = vi.fn().mockRejectedValue(refused)
    await expect(keepTrying(act, readFailure, ports, never)).rejects.toBe(refused)
    expect(act).toHaveBeenCalledTimes(1)
  })

  it('does not go on for ever', async () => {
    const act = vi.fn().mockRejectedValue(lost)
    await expect(keepTrying(act, readFailure, ports, never)).rejects.toBe(lost)
    expect(act).toHaveBeenCalledTimes(14)
  })

  it('ends when it is called off', async () => {
    const controller = new AbortController()
    const act = vi.fn().mockImplementation(async () => {
      controller.abort(new Error('called off'))
      throw lost
    })
    await expect(keepTrying(act, readFailure, ports, controller.signal)).rejects.toThrow('called off')
  })
})
