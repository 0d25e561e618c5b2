import { asItWas } from './as-it-was'
import type { Waiting } from './ask-worker'
import { askWorker, WorkerFailed } from './ask-worker'
import type { SpanS } from './clip-facts'
import type { OpenedClip } from './open-clip'
import type { PreparedClip } from './prepared-clip'

export interface PrepareRequest extends Waiting {
  /** In the clip's own seconds, half-open, in any order; empty keeps everything. */
  keep: SpanS[]
}

/**
 * Makes a clip ready for sending, off the main thread: cut to what is kept, upright, at most 1920 px on the longer side, a
 * key frame every tenth of a second, without sound and tags, every kept frame there with its own time. Where this browser
 * cannot do all of that it does what it can; `way` says which, and `explainWay` puts it into words.
 *
 * The file may lie on this device's storage (`keptAs`): call `forgetPrepared` once it is sent or given up.
 *
 * @throws ClipProblem (`no-frames` for spans that hold fewer than two, `too-long` for more than a minute kept); the signal's reason when told to stop, with nothing left behind
 */
export async function prepareClip({ file, facts }: Pick<OpenedClip, 'file' | 'facts'>, { keep, onProgress, signal }: PrepareRequest): Promise<PreparedClip> {
  try {
    // Copied, since what a screen watches for changes cannot be sent to a worker.
    const copy = keep.map(([fromS, toS]): SpanS => [fromS, toS])
    const word = await askWorker({ kind: 'prepare', file, keep: copy }, { onProgress, signal })
    if (word.kind !== 'prepared') throw new WorkerFailed('The worker answered something else.')
    const { bytes, ...prepared } = word.prepared
    return { ...prepared, file: prepared.way === 'untouched' ? file : new File([bytes], mp4Name(file.name), { type: 'video/mp4' }) }
  }
  catch (error) {
    if (!(error instanceof WorkerFailed)) throw error
    // Without a worker nothing can be done to a clip; as it is, the server may still take it.
    return { file, ...asItWas(facts, keep, [error.message]) }
  }
}

/** `IMG_0012.MOV` becomes `IMG_0012.mp4`. */
function mp4Name(name: string): string {
  return `${name.replace(/\.[^.]*$/, '')}.mp4`
}
