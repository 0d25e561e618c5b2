import { Refusal } from '#server/refusal'

/** Runs work in turn, a fixed number at once; the others wait in order of coming. */
export interface HashQueue {
  /** @throws Refusal `unavailable` when too many wait already. */
  run<T>(work: () => Promise<T>): Promise<T>
}

/**
 * A password hash takes 128 MiB and half a second of a core on purpose, so hashes left to themselves would bring the server down.
 * @param atOnce how many run together, 1 or more.
 * @param maxWaiting how many may wait; whoever comes then is told to try again.
 */
export function createHashQueue(atOnce: number, maxWaiting: number): HashQueue {
  let runningCount = 0
  const waiting: (() => void)[] = []

  async function enter(): Promise<void> {
    if (runningCount < atOnce) {
      runningCount += 1
      return
    }
    if (waiting.length >= maxWaiting) {
      throw new Refusal('unavailable', 'busy', 'Too many people are signing in just now. Try again in a moment.', undefined, 5)
    }
    await new Promise<void>((resolve) => {
      waiting.push(resolve)
    })
  }

  function leave(): void {
    // The place is handed on, not freed: someone who comes between could take it too.
    const next = waiting.shift()
    if (next) next()
    else runningCount -= 1
  }

  return {
    async run(work) {
      await enter()
      try {
        return await work()
      }
      finally {
        leave()
      }
    },
  }
}
