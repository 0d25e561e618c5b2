import { readonly, ref } from 'vue'
import { readErrorAnswer, type ReadError } from '~/utils/errors'

/**
 * One thing a person means to do, however often the button is pressed: a second press while it runs does nothing, and a
 * try after a lost connection carries the same key, so that the server does it once.
 */
export function useDeed() {
  const isPending = ref(false)
  const problem = ref<ReadError>()
  let key: string | undefined
  let keyIsAbout = ''

  /**
   * @param about what is meant, where the same button can mean several things: another meaning gets a key of its own
   * @returns undefined when it failed (see `problem`) or was already running
   */
  async function run<T>(act: (headers: { 'Idempotency-Key': string }) => Promise<T>, about = ''): Promise<T | undefined> {
    if (isPending.value) return undefined
    isPending.value = true
    problem.value = undefined
    if (about !== keyIsAbout) key = undefined
    keyIsAbout = about
    key ??= crypto.randomUUID()
    try {
      const answer = await act({ 'Idempotency-Key': key })
      key = undefined
      return answer
    }
    catch (error) {
      problem.value = readErrorAnswer(error)
      // Without a definite answer it may have been done all the same; only the same key can tell.
      if (isDefinite(problem.value)) key = undefined
      return undefined
    }
    finally {
      isPending.value = false
    }
  }

  return { run, isPending: readonly(isPending), problem }
}

function isDefinite({ statusCode }: ReadError): boolean {
  return statusCode >= 400 && statusCode < 500
}
