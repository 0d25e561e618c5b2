import type { FilmReading } from '#shared/domain/film/reading'

/** What a worker is given when it starts. */
export interface ReaderTask {
  url: string
  bytes: number
  /** Shared with the main thread, see `ReaderSignal`. */
  signal: SharedArrayBuffer
}

/** The one message a worker posts. */
export type ReaderMessage
  = | { kind: 'read', reading: FilmReading }
    | { kind: 'store-unreachable', message: string }

/**
 * Two cells that the main thread can look at while the worker is busy or after it died: whether it ever ran its code, and
 * how many answers of the store it waits for. They tell whose fault a crash or a time-out is.
 */
export class ReaderSignal {
  readonly #cells: Int32Array

  constructor(readonly buffer = new SharedArrayBuffer(8)) {
    this.#cells = new Int32Array(buffer)
  }

  markStarted(): void {
    Atomics.store(this.#cells, 0, 1)
  }

  get hasStarted(): boolean {
    return Atomics.load(this.#cells, 0) === 1
  }

  addWaits(change: 1 | -1): void {
    Atomics.add(this.#cells, 1, change)
  }

  get isWaitingForStore(): boolean {
    return Atomics.load(this.#cells, 1) > 0
  }
}

export function isReaderTask(value: unknown): value is ReaderTask {
  return typeof value === 'object' && value !== null
    && 'url' in value && typeof value.url === 'string'
    && 'bytes' in value && typeof value.bytes === 'number'
    && 'signal' in value && value.signal instanceof SharedArrayBuffer
}

/** Looks at the outside only: both ends are built from one source. */
export function isReaderMessage(value: unknown): value is ReaderMessage {
  return typeof value === 'object' && value !== null
    && 'kind' in value && (value.kind === 'read' || value.kind === 'store-unreachable')
}
