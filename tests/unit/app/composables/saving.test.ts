import { FetchError } from 'ofetch'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useAutosave } from '~/composables/useAutosave'
import { useDeed } from '~/composables/useDeed'

/** An answer of the API in the stable shape. */
function answered(statusCode: number, code: string): Error {
  return Object.assign(new Error(code), { statusCode, data: { statusCode, statusMessage: '', data: { code, message: `Words of ${code}.` } } })
}

/** What `$fetch` throws when nothing came back at all. */
const lost = () => new FetchError('no answer')

beforeEach(() => {
  vi.useFakeTimers()
  vi.stubGlobal('window', globalThis)
})
afterEach(() => {
  vi.useRealTimers()
  vi.unstubAllGlobals()
})

describe('useAutosave', () => {
  it('saves once, soon after the last change', async () => {
    const save = vi.fn(async () => {})
    const autosave = useAutosave(save, 800)
    autosave.touch()
    await vi.advanceTimersByTimeAsync(500)
    autosave.touch()
    expect(autosave.state.value).toBe('waiting')
    await vi.advanceTimersByTimeAsync(799)
    expect(save).not.toHaveBeenCalled()
    await vi.advanceTimersByTimeAsync(1)
    expect(save).toHaveBeenCalledTimes(1)
    expect(autosave.state.value).toBe('kept')
  })

  it('never runs two saves at once, and saves again what changed meanwhile', async () => {
    let underWay = 0
    let most = 0
    const save = vi.fn(async () => {
      underWay += 1
      most = Math.max(most, underWay)
      await new Promise(resolve => setTimeout(resolve, 300))
      underWay -= 1
    })
    const autosave = useAutosave(save, 100)
    autosave.touch()
    await vi.advanceTimersByTimeAsync(200)
    autosave.touch()
    void autosave.flush()
    await vi.advanceTimersByTimeAsync(1000)
    expect(save).toHaveBeenCalledTimes(2)
    expect(most).toBe(1)
  })

  it('tries again by itself after a lost connection, and says when it is kept', async () => {
    const save = vi.fn().mockRejectedValueOnce(lost()).mockRejectedValueOnce(answered(503, 'busy')).mockResolvedValue(undefined)
    const autosave = useAutosave(save, 100)
    autosave.touch()
    await vi.advanceTimersByTimeAsync(100)
    expect(autosave.state.value).toBe('failed')
    expect(autosave.problem.value?.isPassing).toBe(true)
    await vi.advanceTimersByTimeAsync(2_000)
    expect(save).toHaveBeenCalledTimes(2)
    await vi.advanceTimersByTimeAsync(4_000)
    expect(autosave.state.value).toBe('kept')
    expect(autosave.problem.value).toBeUndefined()
  })

  it('does not repeat what was refused, until something changes', async () => {
    const save = vi.fn().mockRejectedValueOnce(answered(409, 'draft-changed-elsewhere')).mockResolvedValue(undefined)
    const autosave = useAutosave(save, 100)
    autosave.touch()
    await vi.advanceTimersByTimeAsync(60_000)
    expect(save).toHaveBeenCalledTimes(1)
    expect(autosave.problem.value?.code).toBe('draft-changed-elsewhere')
    expect(await autosave.flush()).toBe(true)
    expect(save).toHaveBeenCalledTimes(2)
  })

  it('has nothing to flush before a change', async () => {
    const save = vi.fn(async () => {})
    expect(await useAutosave(save).flush()).toBe(true)
    expect(save).not.toHaveBeenCalled()
  })
})

describe('useDeed', () => {
  function sender(...results: (Error | 'ok')[]) {
    const keys: string[] = []
    const act = async (headers: { 'Idempotency-Key': string }) => {
      keys.push(headers['Idempotency-Key'])
      const result = results.shift() ?? 'ok'
      if (result instanceof Error) throw result
      return result
    }
    return { keys, act }
  }

  it('does nothing on a second press while the first runs', async () => {
    const { keys, act } = sender()
    const deed = useDeed()
    const both = await Promise.all([deed.run(act), deed.run(act)])
    expect(both).toEqual(['ok', undefined])
    expect(keys).toHaveLength(1)
  })

  it('sends the same key again when no answer came, or a fault of the server', async () => {
    const { keys, act } = sender(lost(), answered(503, 'busy'), 'ok')
    const deed = useDeed()
    await deed.run(act)
    expect(deed.problem.value?.code).toBe('no-answer')
    await deed.run(act)
    await deed.run(act)
    expect(new Set(keys).size).toBe(1)
  })

  it('takes a new key after a definite answer', async () => {
    const { keys, act } = sender(answered(409, 'already-in-hand'), 'ok', 'ok')
    const deed = useDeed()
    await deed.run(act)
    await deed.run(act)
    await deed.run(act)
    expect(new Set(keys).size).toBe(3)
  })

  it('takes a new key for another meaning', async () => {
    const { keys, act } = sender(lost(), 'ok')
    const deed = useDeed()
    await deed.run(act, 'version 3')
    await deed.run(act, 'version 4')
    expect(new Set(keys).size).toBe(2)
  })
})
