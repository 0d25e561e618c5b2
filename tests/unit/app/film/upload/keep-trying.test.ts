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

  it('waits for a line for as long as it takes', async () => {
    const act = vi.fn()
    for (let count = 0; count < 200; count += 1) act.mockRejectedValueOnce(lost)
    act.mockResolvedValue('read')
    expect(await keepTrying(act, readFailure, ports, never)).toBe('read')
    expect(act).toHaveBeenCalledTimes(201)
  })

  it('tells a fault of the server that stays', async () => {
    const fault = new Failed({ kind: 'status', status: 500 })
    const act = vi.fn().mockRejectedValue(fault)
    await expect(keepTrying(act, readFailure, ports, never)).rejects.toBe(fault)
    expect(act).toHaveBeenCalledTimes(8)
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
