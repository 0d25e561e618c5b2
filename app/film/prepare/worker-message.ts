import type { FilmRefusal } from '#shared/domain/film/refusals'
import type { SpanS } from './clip-facts'
import type { MotionSample } from './motion-spans'
import type { PreparedBytes } from './prepared-clip'

/** What the page asks of the worker: one task, and perhaps to stop it. */
export type WorkerTask
  = | { kind: 'prepare', file: Blob, keep: SpanS[] }
    | { kind: 'measure-motion', file: Blob }

export type ToWorker = WorkerTask | { kind: 'stop' }

export interface Progress {
  /** Frames done of those to do; the last step, writing the index, is after all of them. */
  done: number
  total: number
}

/** What the worker answers: progress, then one of the others as its last word. */
export type FromWorker
  = | { kind: 'progress', progress: Progress }
    | { kind: 'prepared', prepared: PreparedBytes }
    | { kind: 'motion', samples: MotionSample[] }
    | { kind: 'stopped' }
    | { kind: 'problem', reason: FilmRefusal, detail: string }
    | { kind: 'failed', message: string }

/** What a task in the worker tells and hears while it runs. */
export interface Watch {
  signal: AbortSignal
  onProgress(progress: Progress): void
}
