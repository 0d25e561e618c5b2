import { getCurrentScope, onScopeDispose, readonly, ref } from 'vue'
import { readErrorAnswer, type ReadError } from '~/utils/errors'

/** `waiting`: changed and soon to be saved; `failed`: refused or not reached, and tried again when `isPassing`. */
export type AutosaveState = 'idle' | 'waiting' | 'saving' | 'kept' | 'failed'

export interface AutosaveProblem extends ReadError {
  /** True when the connection or the server failed rather than the words: a later try may work as it is. */
  isPassing: boolean
}

const FIRST_RETRY_MS = 2_000
const LONGEST_RETRY_MS = 60_000

/**
 * Saves soon after the last change, one save at a time; what changes while one is under way is saved after it.
 * @param save sends what stands now; may throw
 */
export function useAutosave(save: () => Promise<void>, delayMs = 800) {
  const state = ref<AutosaveState>('idle')
  const keptAtMs = ref<number>()
  const problem = ref<AutosaveProblem>()
  let timer: number | undefined
  let isChanged = false
  let failedCount = 0
  let running: Promise<boolean> | undefined

  function touch() {
    isChanged = true
    if (running !== undefined) return
    state.value = 'waiting'
    schedule(delayMs)
  }

  function schedule(inMs: number) {
    window.clearTimeout(timer)
    timer = window.setTimeout(() => void flush(), inMs)
  }

  /** Saves now what waits. True when nothing is left to save. */
  async function flush(): Promise<boolean> {
    window.clearTimeout(timer)
    running ??= saveAll()
    try {
      return await running
    }
    finally {
      running = undefined
    }
  }

  async function saveAll(): Promise<boolean> {
    while (isChanged) {
      isChanged = false
      state.value = 'saving'
      problem.value = undefined
      try {
        await save()
      }
      catch (error) {
        isChanged = true
        fail(error)
        return false
      }
      failedCount = 0
      keptAtMs.value = Date.now()
      state.value = 'kept'
    }
    return true
  }

  function fail(error: unknown) {
    failedCount += 1
    const answer = readErrorAnswer(error)
    const isPassing = isPassingFailure(answer)
    problem.value = { ...answer, isPassing }
    state.value = 'failed'
    if (isPassing) schedule(Math.min(LONGEST_RETRY_MS, FIRST_RETRY_MS * 2 ** (failedCount - 1)))
  }

  /** Nothing is left to save: what waited was given up on purpose. */
  function settle() {
    window.clearTimeout(timer)
    isChanged = false
    problem.value = undefined
    state.value = 'idle'
  }

  const tryAgain = () => void (state.value === 'failed' && flush())
  if ('window' in globalThis && getCurrentScope() !== undefined) {
    window.addEventListener('online', tryAgain)
    onScopeDispose(() => {
      window.removeEventListener('online', tryAgain)
      // What was typed last must not be lost by leaving quickly.
      if (state.value === 'waiting') void flush()
      else window.clearTimeout(timer)
    })
  }

  return { state: readonly(state), keptAtMs: readonly(keptAtMs), problem: readonly(problem), touch, flush, settle }
}

function isPassingFailure({ statusCode }: ReadError): boolean {
  return statusCode === 0 || statusCode >= 500 || statusCode === 429
}
