/**
 * Lets at most `width` tasks run at a time; the others wait in the order they came.
 *
 * @returns a function that runs a task when its turn comes and settles as the task does
 */
export function createTurnstile(width: number): <T>(task: () => Promise<T>) => Promise<T> {
  const waiting: (() => void)[] = []
  let running = 0

  async function enter(): Promise<void> {
    if (running < width) {
      running++
      return
    }
    // The place is handed over by whoever leaves, so that nobody who comes in between takes it.
    await new Promise<void>(resolve => waiting.push(resolve))
  }

  function leave(): void {
    const next = waiting.shift()
    if (next)
      next()
    else
      running--
  }

  return async (task) => {
    await enter()
    try {
      return await task()
    }
    finally {
      leave()
    }
  }
}
