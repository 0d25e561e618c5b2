import type { PartsAnswer, UploadPart } from '#shared/types/reviews'
import { countSentBytes, missingParts, planParts, type PartRange } from './plan'
import { decideNextStep, type PartFailure } from './retry'

/** Three at once fill a line that loses a packet now and then; more only compete. */
export const PARTS_AT_ONCE_COUNT = 3

/** A part that did not arrive. */
export class PartError extends Error {
  constructor(readonly failure: PartFailure) {
    super(failure.kind === 'network' ? 'The part did not reach the store.' : `The store answered ${failure.status}.`)
    this.name = 'PartError'
  }
}

/** The clip cannot be sent to the end. */
export class UploadStopped extends Error {
  constructor(readonly reason: 'gone' | 'refused' | 'unreachable') {
    super(`Sending stopped: ${reason}.`)
    this.name = 'UploadStopped'
  }
}

/** The world around the sending, handed in so that the order of things can be tested without a network. */
export interface SendPorts {
  /** Sends the bytes; reports how many have left. Throws PartError, or the signal's reason when it is aborted. */
  putPart: (url: string, range: PartRange, onSentBytes: (bytes: number) => void, signal: AbortSignal) => Promise<void>
  /** Fresh addresses for these numbers, and what the store has. */
  askParts: (numbers: number[]) => Promise<PartsAnswer>
  wait: (waitMs: number, signal: AbortSignal) => Promise<void>
  /** 0 to 1. */
  random: () => number
}

export interface SendPlan {
  fileBytes: number
  partBytes: number
  parts: UploadPart[]
  doneNumbers: number[]
}

/**
 * Sends every part the store does not have, three at a time, each until it arrives or cannot.
 * @param onSentBytes called with the bytes of the whole file that have left so far
 * @throws UploadStopped when a part cannot arrive; the signal's reason when aborted
 */
export async function sendParts(
  plan: SendPlan,
  ports: SendPorts,
  onSentBytes: (bytes: number) => void,
  signal: AbortSignal,
): Promise<void> {
  const ranges = planParts(plan.fileBytes, plan.partBytes)
  const urls = new Map(plan.parts.map(part => [part.number, part.url]))
  const done = [...plan.doneNumbers]
  const sentByNumber = new Map<number, number>()
  const waiting = missingParts(ranges, done)
  // One part that cannot arrive ends the others too, rather than sending megabytes for nothing.
  const stop = new AbortController()
  const stopToo = () => stop.abort(signal.reason)
  signal.throwIfAborted()
  signal.addEventListener('abort', stopToo)
  const report = () => onSentBytes(countSentBytes(ranges, done, sentByNumber))

  async function worker(): Promise<void> {
    for (let range = waiting.shift(); range !== undefined; range = waiting.shift()) {
      const { number } = range
      await sendOnePart(range, urls, ports, (bytes) => {
        sentByNumber.set(number, bytes)
        report()
      }, stop.signal)
      done.push(number)
      report()
    }
  }

  report()
  const workers = Array.from({ length: Math.min(PARTS_AT_ONCE_COUNT, waiting.length) }, worker)
  try {
    await Promise.all(workers)
  }
  catch (error) {
    stop.abort(error)
    await Promise.allSettled(workers)
    throw error
  }
  finally {
    signal.removeEventListener('abort', stopToo)
  }
}

async function sendOnePart(
  range: PartRange,
  urls: Map<number, string>,
  ports: SendPorts,
  onSentBytes: (bytes: number) => void,
  signal: AbortSignal,
): Promise<void> {
  for (let failedCount = 0; ;) {
    try {
      const url = urls.get(range.number) ?? await freshAddress(range.number, urls, ports)
      if (url === undefined) return
      await ports.putPart(url, range, onSentBytes, signal)
      return
    }
    catch (error) {
      signal.throwIfAborted()
      if (!(error instanceof PartError)) throw error
      failedCount += 1
      onSentBytes(0)
      const next = decideNextStep(error.failure, failedCount, ports.random())
      if (next.step === 'give-up') throw new UploadStopped(next.reason)
      if (next.step === 'fresh-address') urls.delete(range.number)
      await ports.wait(next.waitMs, signal)
    }
  }
}

/** Undefined when the store turns out to have the part: the answer to the first try was lost, not the bytes. */
async function freshAddress(number: number, urls: Map<number, string>, ports: SendPorts): Promise<string | undefined> {
  const answer = await ports.askParts([number])
  if (answer.done.includes(number)) return undefined
  for (const part of answer.parts) urls.set(part.number, part.url)
  const url = urls.get(number)
  if (url === undefined) throw new UploadStopped('gone')
  return url
}
