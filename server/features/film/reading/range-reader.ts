import { StoreUnreachable, UnsoundFilm } from './reading.errors'

/** Read at once around whatever is asked for: headers lie close together, and a request costs more than its bytes. */
const BLOCK_BYTES = 32 * 1024

/** Held in memory for as long as the worker lives, outside the heap that its resource limits count. */
export const READ_MAX_BYTES = 32 * 1024 * 1024

const SINGLE_READ_MAX_BYTES = 16 * 1024 * 1024

/** Under the time limit of a whole reading, so that a hanging store is told apart from a film that is slow to read. */
const REQUEST_TIME_LIMIT_MS = 10_000

export interface RangeReaderOptions {
  /** Presigned GET address of the stored object. */
  url: string
  /** Size of the object as the store told it. */
  bytes: number
  /** Called with +1 before and −1 after each wait on the store. */
  onWait?: (change: 1 | -1) => void
}

/**
 * Reads ranges of a stored object over HTTP, in blocks that are fetched once and kept.
 *
 * Throws `StoreUnreachable` when the store fails and `UnsoundFilm` when a reading asks for more than any sound film
 * needs. The first store fault is remembered in `fault`, since libraries in between may swallow or wrap it.
 */
export class RangeReader {
  readonly bytes: number
  bytesRead = 0
  fault: StoreUnreachable | undefined

  readonly #options: RangeReaderOptions
  readonly #blocks = new Map<number, Uint8Array>()

  constructor(options: RangeReaderOptions) {
    this.#options = options
    this.bytes = options.bytes
  }

  /**
   * Bytes from `start` up to `end`, exclusive.
   *
   * A range outside the file is `UnsoundFilm`: some table pointed there.
   */
  async read(start: number, end: number): Promise<Uint8Array> {
    this.#requireInside(start, end)
    await this.load(start, end)
    return this.peek(start, end)
  }

  /** As `read`, of what has been loaded before; of anything else `UnsoundFilm`. Thousands of small looks need not wait. */
  peek(start: number, end: number): Uint8Array {
    this.#requireInside(start, end)
    const found = new Uint8Array(end - start)
    for (let block = Math.floor(start / BLOCK_BYTES); block * BLOCK_BYTES < end; block++) {
      const at = block * BLOCK_BYTES
      const stored = this.#blocks.get(block)
      if (!stored)
        throw new UnsoundFilm('unreadable', 'not loaded')
      found.set(stored.subarray(Math.max(0, start - at), end - at), Math.max(0, at - start))
    }
    return found
  }

  #requireInside(start: number, end: number): void {
    if (!Number.isSafeInteger(start) || !Number.isSafeInteger(end) || start < 0 || end < start || end > this.bytes)
      throw new UnsoundFilm('unreadable', 'points outside the file')
    if (end - start > SINGLE_READ_MAX_BYTES)
      throw new UnsoundFilm('unreadable', 'asks for too much at once')
  }

  /** Fetches what is not here yet of a range, one request for each run of missing blocks. */
  async load(start: number, end: number): Promise<void> {
    const lastBlock = Math.ceil(end / BLOCK_BYTES)
    let block = Math.floor(start / BLOCK_BYTES)
    while (block < lastBlock) {
      if (this.#blocks.has(block)) {
        block++
        continue
      }
      const from = block
      while (block < lastBlock && !this.#blocks.has(block))
        block++
      await this.#fetchBlocks(from, block)
    }
  }

  async #fetchBlocks(from: number, to: number): Promise<void> {
    const start = from * BLOCK_BYTES
    const end = Math.min(to * BLOCK_BYTES, this.bytes)
    this.bytesRead += end - start
    if (this.bytesRead > READ_MAX_BYTES)
      throw new UnsoundFilm('unreadable', 'asks for too much of the file')
    const fetched = await this.#fetchRange(start, end)
    // Copied, so that one kept block does not hold a whole answer in memory.
    for (let at = start; at < end; at += BLOCK_BYTES)
      this.#blocks.set(at / BLOCK_BYTES, fetched.slice(at - start, at - start + BLOCK_BYTES))
  }

  async #fetchRange(start: number, end: number): Promise<Uint8Array> {
    this.#options.onWait?.(1)
    try {
      const answer = await fetch(this.#options.url, {
        headers: { 'range': `bytes=${start}-${end - 1}`, 'accept-encoding': 'identity' },
        redirect: 'error',
        signal: AbortSignal.timeout(REQUEST_TIME_LIMIT_MS),
      })
      const refusal = this.#findRefusal(answer, end - start)
      if (refusal) {
        await answer.body?.cancel()
        throw refusal
      }
      const body = new Uint8Array(await answer.arrayBuffer())
      if (body.length !== end - start)
        throw new StoreUnreachable(`the store gave ${body.length} of ${end - start} bytes`)
      return body
    }
    catch (error) {
      if (error instanceof UnsoundFilm)
        throw error
      this.fault = error instanceof StoreUnreachable ? error : new StoreUnreachable(`the store did not answer: ${String(error)}`)
      throw this.fault
    }
    finally {
      this.#options.onWait?.(-1)
    }
  }

  /** Judged by the headers, so that a body of the wrong size is never taken in. */
  #findRefusal(answer: Response, wanted: number): Error | undefined {
    if (answer.status === 416)
      return new UnsoundFilm('unreadable', 'smaller than announced')
    if (answer.status !== 206)
      return new StoreUnreachable(`the store answered ${answer.status} to a range`)
    const total = /^bytes \d+-\d+\/(\d+)$/.exec(answer.headers.get('content-range') ?? '')?.[1]
    if (total !== undefined && Number(total) !== this.bytes)
      return new UnsoundFilm('unreadable', 'not of the size announced')
    const length = answer.headers.get('content-length')
    if (length !== null && Number(length) !== wanted)
      return new StoreUnreachable(`the store gave ${length} of ${wanted} bytes`)
    return undefined
  }
}
