import { ClipProblem } from './clip-problem'
import { forgetPrepared } from './device-storage'
import type { FromWorker, Progress, ToWorker, WorkerTask } from './worker-message'

/** What whoever waits may hear and say meanwhile. */
export interface Waiting {
  onProgress?: (progress: Progress) => void
  signal?: AbortSignal
}

type LastWord = Exclude<FromWorker, { kind: 'progress' }>

/** The worker could not be started, or ended without an answer. */
export class WorkerFailed extends Error {}

/**
 * Gives a worker of its own one task and waits for its last word; the worker is gone afterwards.
 *
 * @throws the signal's reason when told to stop, after the worker has cleaned up; ClipProblem; WorkerFailed
 */
export async function askWorker(task: WorkerTask, { onProgress, signal }: Waiting): Promise<LastWord> {
  signal?.throwIfAborted()
  const worker = new Worker(new URL('./prepare.worker.ts', import.meta.url), { type: 'module' })
  const send = (message: ToWorker) => worker.postMessage(message)
  const stop = () => send({ kind: 'stop' })
  signal?.addEventListener('abort', stop, { once: true })
  try {
    const word = await new Promise<LastWord>((resolve, reject) => {
      worker.addEventListener('message', ({ data: message }: MessageEvent<FromWorker>) => {
        if (message.kind !== 'progress') resolve(message)
        else if (!signal?.aborted) onProgress?.(message.progress)
      })
      worker.addEventListener('error', event => reject(new WorkerFailed(event.message)))
      worker.addEventListener('messageerror', () => reject(new WorkerFailed('An answer could not be read.')))
      send(task)
    })
    // Told to stop just as it was done: nobody would ever ask for the film.
    if (signal?.aborted && word.kind === 'prepared') await forgetPrepared(word.prepared)
    signal?.throwIfAborted()
    if (word.kind === 'problem') throw new ClipProblem(word.reason, word.detail)
    if (word.kind === 'failed') throw new WorkerFailed(word.message)
    return word
  }
  finally {
    signal?.removeEventListener('abort', stop)
    worker.terminate()
  }
}
