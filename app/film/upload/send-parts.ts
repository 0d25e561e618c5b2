import type { PartsAnswer, UploadPart } from '#shared/types/reviews'
import { countSentBytes, missingParts, planParts, type PartRange } from './plan'
import { decideNextStep, isRefusal, type PartFailure } from './retry'

/** Three at once fill a line that loses a packet now and then; more only compete. */
export const PARTS_AT_ONCE_COUNT = 3

/** A part that did not arrive. */
export class PartError extends Error {
  constructor(readonly failure: PartFailure) {
    super(failure.kind === 'network' ? 'The part did not reach the store.' : `The store answered ${failure.status}.`)
    this.name = 'PartError'
  }
}

export type StopReason = 'gone' | 'refused' | 'unreadable' | 'other-file'

/** The clip cannot be sent to the end. */
export class UploadStopped extends Error {
  constructor(readonly reason: StopReason) {
    super(`Sending stopped: ${reason}.`)
    this.name = 'UploadStopped'
  }
}

/** The world around the sending, handed in so that the order of things can be tested without a network. */
export interface SendPorts {
  /** Sends the bytes; reports how many have left. Throws PartError, UploadStopped, or the signal's reason when it is aborted. */
  putPart: (url: string, range: PartRange, onSentBytes: (bytes: number) => void, signal: AbortSignal) => Promise<void>
  /** Fresh addresses for these numbers, and what the store has. */
  askParts: (numbers: number[], signal: AbortSignal) => Promise<PartsAnswer>
  wait: (waitMs: number, signal: AbortSignal) => Promise<void>
  /** 0 to 1. */
  random: () => number
}

export interface SendPlan {
  fileBytes: number
  partBytes: number
  /** Addresses at hand; a part without one is asked for. */
  parts: UploadPart[]
  doneNumbers: number[]
}

export interface SendProgress {
  /** Of the whole file, on the way included. */
  sentBytes: number
  doneNumbers: readonly number[]
  /** True while every part under way has failed and waits for its next try. */
  isWaiting: boolean
}

/** What the parts of one film share. */
interface Sending {
  ranges: PartRange[]
  waiting: PartRange[]
  urls: Map<number, string>
  done: number[]
  sentByNumber: Map<number, number>
  /** Numbers under way; true for one that failed and has not moved since. */
  isStalled: Map<number, boolean>
  ports: SendPorts
  report: () => void
}

/**
 * Sends every part the store does not have, three at a time, each until it arrives or cannot. A part that arrived is never sent
 * again, one whose answer was lost only after the store has said that it lacks it.
 * @throws UploadStopped when a part cannot arrive; the signal's reason when aborted
 */
export async function sendParts(plan: SendPlan, ports: SendPorts, onProgress: (progress: SendProgress) => void, signal: AbortSignal): Promise<void> {
  const ranges = planParts(plan.fileBytes, plan.partBytes)
  // One part that cannot arrive ends the others too, rather than sending megabytes for nothing.
  const stop = new AbortController()
  const sending: Sending = {
    ranges,
    waiting: missingParts(ranges, plan.doneNumbers),
    urls: new Map(plan.parts.map(part => [part.number, part.url])),
    done: [...plan.doneNumbers],
    sentByNumber: new Map(),
    isStalled: new Map(),
    ports,
    report: () => {
      if (!stop.signal.aborted) onProgress(readProgress(sending))
    },
  }
  const stopToo = () => stop.abort(signal.reason)
  signal.throwIfAborted()
  signal.addEventListener('abort', stopToo)
  sending.report()
  const lanes = Array.from({ length: Math.min(PARTS_AT_ONCE_COUNT, sending.waiting.length) }, () => sendInTurn(sending, stop.signal))
  try {
    await Promise.all(lanes)
  }
  catch (error) {
    stop.abort(error)
    await Promise.allSettled(lanes)
    throw error
  }
  finally {
    signal.removeEventListener('abort', stopToo)
  }
}

async function sendInTurn(sending: Sending, signal: AbortSignal): Promise<void> {
  for (let range = sending.waiting.shift(); range !== undefined; range = sending.waiting.shift()) {
    sending.isStalled.set(range.number, false)
    await sendOnePart(range, sending, signal)
    sending.isStalled.delete(range.number)
    sending.done.push(range.number)
    sending.report()
  }
}

async function sendOnePart(range: PartRange, sending: Sending, signal: AbortSignal): Promise<void> {
  const { urls, ports } = sending
  const note = (bytes: number, isStalled: boolean) => {
    sending.sentByNumber.set(range.number, bytes)
    sending.isStalled.set(range.number, isStalled)
    sending.report()
  }
  for (let failedCount = 0, refusedCount = 0; ;) {
    signal.throwIfAborted()
    try {
      const url = urls.get(range.number) ?? await findAddress(range.number, sending, signal)
      if (url === undefined) return
      await ports.putPart(url, range, bytes => note(bytes, false), signal)
      return
    }
    catch (error) {
      signal.throwIfAborted()
      if (!(error instanceof PartError)) throw error
      const { failure } = error
      failedCount += 1
      // Addresses were given together and run out together.
      if (isRefusal(failure)) {
        refusedCount += 1
        urls.clear()
      }
      note(0, true)
      const next = decideNextStep(failure, { failedCount, refusedCount }, ports.random())
      if (next.step === 'give-up') throw new UploadStopped(next.reason)
      if (next.step === 'ask-store') urls.delete(range.number)
      await ports.wait(next.waitMs, signal)
    }
  }
}

/** Undefined when the store turns out to have the part: the answer to the first try was lost, not the bytes. */
async function findAddress(number: number, { urls, ports }: Sending, signal: AbortSignal): Promise<string | undefined> {
  const answer = await ports.askParts([number], signal)
  if (answer.done.includes(number)) return undefined
  for (const part of answer.parts) urls.set(part.number, part.url)
  const url = urls.get(number)
  if (url === undefined) throw new UploadStopped('gone')
  return url
}

function readProgress({ ranges, done, sentByNumber, isStalled }: Sending): SendProgress {
  const underWay = [...isStalled.values()]
  return {
    sentBytes: countSentBytes(ranges, done, sentByNumber),
    doneNumbers: done,
    isWaiting: underWay.length > 0 && underWay.every(Boolean),
  }
}
