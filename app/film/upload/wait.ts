/** Waits, or throws the signal's reason at once. While the device is off line the wait lasts until it is back. */
export async function waitForNextTry(waitMs: number, signal: AbortSignal): Promise<void> {
  await until(signal, done => window.setTimeout(done, waitMs), id => window.clearTimeout(id))
  if (navigator.onLine) return
  let isBack = () => {}
  await until(signal, (done) => {
    isBack = done
    window.addEventListener('online', done, { once: true })
  }, () => window.removeEventListener('online', isBack))
}

function until<T>(signal: AbortSignal, start: (done: () => void) => T, stop: (started: T) => void): Promise<void> {
  return new Promise((resolve, reject) => {
    signal.throwIfAborted()
    const onAbort = () => {
      stop(started)
      reject(signal.reason)
    }
    const started = start(() => {
      signal.removeEventListener('abort', onAbort)
      resolve()
    })
    signal.addEventListener('abort', onAbort, { once: true })
  })
}
