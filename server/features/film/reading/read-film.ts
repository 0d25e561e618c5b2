import type { FilmReading } from '#shared/domain/film/reading'
import type { ReaderTask } from './reader-message'
import { Worker } from 'node:worker_threads'
import { FILM_MAX_BYTES } from '#shared/domain/film/limits'
import { isReaderMessage, ReaderSignal } from './reader-message'
import { FilmReaderBroken, StoreUnreachable } from './reading.errors'
import { createTurnstile } from './turnstile'

export interface ReadFilmInput {
  /** Presigned GET address of the stored object. */
  url: string
  /** Size of the object as the store tells it. */
  bytes: number
  /** The file that `buildFilmWorker` wrote. */
  workerPath: string
  /** Counted from the start of the worker, not from the call; 20 seconds unless given. */
  timeLimitMs?: number
}

const TIME_LIMIT_MS = 20_000

/** Each worker may hold 160 MB of heap and 32 MB of the file; a small server has room for two. */
const takeTurn = createTurnstile(2)

/**
 * Reads a stored film in a worker thread of its own and judges it. Never throws for a bad film: one that breaks, blocks or
 * exhausts the worker is refused, and the main thread is not held up.
 *
 * @throws StoreUnreachable when the store fails, hangs or breaks off; try again later
 * @throws FilmReaderBroken when the worker cannot start; trying again does not help
 */
export async function readFilm(input: ReadFilmInput): Promise<FilmReading> {
  if (input.bytes > FILM_MAX_BYTES)
    return { kind: 'refused', reason: 'too-large', detail: `${input.bytes} bytes` }
  return takeTurn(() => runWorker(input))
}

async function runWorker({ url, bytes, workerPath, timeLimitMs = TIME_LIMIT_MS }: ReadFilmInput): Promise<FilmReading> {
  const signal = new ReaderSignal()
  const worker = new Worker(workerPath, {
    workerData: { url, bytes, signal: signal.buffer } satisfies ReaderTask,
    resourceLimits: { maxOldGenerationSizeMb: 128, maxYoungGenerationSizeMb: 32, stackSizeMb: 4 },
    // No settings and no flags of the server: a worker that is taken over finds no keys.
    env: {},
    execArgv: [],
    // The parser's warnings about a hostile file would fill the server's log.
    stdout: true,
    stderr: true,
  })
  worker.stdout.resume()
  worker.stderr.resume()
  try {
    return await hearFrom(worker, signal, timeLimitMs)
  }
  finally {
    await worker.terminate()
  }
}

function hearFrom(worker: Worker, signal: ReaderSignal, timeLimitMs: number): Promise<FilmReading> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => {
      if (signal.isWaitingForStore)
        reject(new StoreUnreachable('the store took too long'))
      else
        resolve({ kind: 'refused', reason: 'took-too-long', detail: `over ${timeLimitMs} ms` })
    }, timeLimitMs)

    function endWithout(message: string): void {
      clearTimeout(timer)
      if (signal.hasStarted)
        resolve({ kind: 'refused', reason: 'unreadable', detail: message })
      else
        reject(new FilmReaderBroken(message))
    }

    worker.once('message', (message: unknown) => {
      clearTimeout(timer)
      if (!isReaderMessage(message))
        reject(new FilmReaderBroken('the worker posted something else'))
      else if (message.kind === 'store-unreachable')
        reject(new StoreUnreachable(message.message))
      else
        resolve(message.reading)
    })
    // Out of memory arrives here too, as ERR_WORKER_OUT_OF_MEMORY.
    worker.once('error', error => endWithout(error.message))
    // Settling twice does nothing: after a message or an error this is the ordinary end.
    worker.once('exit', code => endWithout(`the worker ended with ${code}`))
  })
}
