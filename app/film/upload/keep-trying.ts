import { backOffMs, isPassing, type PartFailure } from './retry'
import type { SendPorts } from './send-parts'

/** A fault of our own server may pass with a restart; one that stays is to be told. */
const FAULTS_MAX_COUNT = 8

/**
 * Asks our server again while only the connection or the server fails; `act` must be safe to repeat (the same Idempotency-Key).
 * @param readFailure what went wrong
 * @throws the last error, when it is a definite answer or a fault (500) that stays; the signal's reason when aborted
 */
export async function keepTrying<T>(
  act: () => Promise<T>,
  readFailure: (error: unknown) => PartFailure,
  ports: Pick<SendPorts, 'wait' | 'random'>,
  signal: AbortSignal,
): Promise<T> {
  let faultCount = 0
  for (let failedCount = 1; ; failedCount += 1) {
    signal.throwIfAborted()
    try {
      return await act()
    }
    catch (error) {
      signal.throwIfAborted()
      const failure = readFailure(error)
      if (failure.kind === 'status' && failure.status === 500) faultCount += 1
      if (faultCount >= FAULTS_MAX_COUNT || (failure.kind === 'status' && !isPassing(failure.status))) throw error
      await ports.wait(backOffMs(failedCount, ports.random()), signal)
    }
  }
}
