import type { Waiting } from './ask-worker'
import { askWorker, WorkerFailed } from './ask-worker'
import type { SpanS } from './clip-facts'
import { findSwingSpans } from './motion-spans'
import type { OpenedClip } from './open-clip'
import { slowedByOf } from './slow-motion'

/**
 * Looks through a clip for swings. A suggestion, no more: the person who swung keeps what they want.
 *
 * @param slowedBy how many times slower than life the clip plays, where somebody knows better than its tag
 * @returns at most six spans in the clip's own seconds, in order; empty when nothing stands out, or this browser cannot look
 * @throws the signal's reason when told to stop
 */
export async function suggestSwings({ file, facts }: Pick<OpenedClip, 'file' | 'facts'>, { onProgress, signal, slowedBy = slowedByOf(facts) }: Waiting & { slowedBy?: number } = {}): Promise<SpanS[]> {
  try {
    const word = await askWorker({ kind: 'measure-motion', file }, { onProgress, signal })
    const startS = facts.frameTimesS[0] ?? 0
    return word.kind === 'motion' ? findSwingSpans(word.samples, { startS, endS: startS + facts.durationMs / 1000, slowedBy }) : []
  }
  catch (error) {
    if (error instanceof WorkerFailed) return []
    throw error
  }
}
