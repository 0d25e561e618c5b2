import { LONGEST_WAIT_MS } from './retry'

/**
 * Waits before the next try, or throws the signal's reason at once. Off line it waits until the line is back, and the moment it is
 * back there is nothing more to wait for. Devices are wrong about their line at times, so half a minute is the most either way.
 */
export async function waitForNextTry(waitMs: number, signal: AbortSignal): Promise<void> {
  await new Promise<void>((resolve, reject) => {
    signal.throwIfAborted()
    const end = () => {
      window.clearTimeout(timer)
      window.removeEventListener('online', goOn)
      signal.removeEventListener('abort', stop)
    }
    const goOn = () => {
      end()
      resolve()
    }
    const stop = () => {
      end()
      reject(signal.reason)
    }
    let timer = window.setTimeout(() => {
      if (navigator.onLine) goOn()
      else timer = window.setTimeout(goOn, LONGEST_WAIT_MS)
    }, waitMs)
    window.addEventListener('online', goOn)
    signal.addEventListener('abort', stop)
  })
}
