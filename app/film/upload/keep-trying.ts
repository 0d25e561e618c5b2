import { decideNextStep, type PartFailure } from './retry'
import type { SendPorts } from './send-parts'

/**
 * Asks again while only the connection or the server fails; `act` must be safe to repeat (the same Idempotency-Key).
 * @param readFailure what went wrong
 * @throws the last error, when it is a definite answer or nothing came for too long; the signal's reason when aborted
 */
export async function keepTrying<T>(
  act: () => Promise<T>,
  readFailure: (error: unknown) => PartFailure,
  ports: Pick<SendPorts, 'wait' | 'random'>,
  signal: AbortSignal,
): Promise<T> {
  for (let failedCount = 1; ; failedCount += 1) {
    try {
      return await act()
    }
    catch (error) {
      signal.throwIfAborted()
      const next = decideNextStep(readFailure(error), failedCount, ports.random())
      if (next.step !== 'again') throw error
      await ports.wait(next.waitMs, signal)
    }
  }
}
