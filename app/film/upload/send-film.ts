import type { ClipBrief, PartsAnswer, UploadPart } from '#shared/types/reviews'
import { readErrorAnswer } from '~/utils/errors'
import { asOnlySender } from './claim-clip'
import type { FilmKeeper } from './keep/film-keeper'
import type { KeptFilm } from './keep/kept-film'
import { findKept, updateKept } from './keep/ledger'
import { planParts } from './plan'
import { putPart } from './put-part'
import { sendParts, type SendPorts, type SendProgress } from './send-parts'

const TELL_EVERY_MS = 200
const NOTE_EVERY_MS = 1_000

/** Another tab of this browser was sending the clip and has ended it, one way or the other: the server knows which. */
export class EndedElsewhere extends Error {}

export interface FilmToSend {
  film: KeptFilm
  keeper: FilmKeeper
  /** Addresses that came with the beginning; without them the store is asked first what it has. */
  parts: UploadPart[] | undefined
}

/** Our server, patient with a bad line, and what a screen wants to know. */
export interface FilmPorts extends Pick<SendPorts, 'wait' | 'random'> {
  askParts: (clipId: string, numbers: number[], signal: AbortSignal) => Promise<PartsAnswer>
  complete: (clipId: string, signal: AbortSignal) => Promise<ClipBrief>
  onElsewhere: () => void
  onProgress: (progress: SendProgress) => void
  /** All bytes have arrived; the server is asked to read them. */
  onArrived: () => void
}

/**
 * Sends a film to the end, from wherever it stands: asks the store what it has, sends the rest, has the server join and read it.
 * @returns the clip as read, taken or refused
 * @throws UploadStopped; EndedElsewhere; the server's refusals; the signal's reason when aborted
 */
export async function sendFilm({ film, keeper, parts }: FilmToSend, ports: FilmPorts, signal: AbortSignal): Promise<ClipBrief> {
  return await asOnlySender(film.clipId, signal, ports.onElsewhere, async (hadToWait) => {
    if (hadToWait && await findKept(film.clipId).catch(() => undefined) === undefined) throw new EndedElsewhere()
    const begun = parts === undefined ? await askWhatThereIs(film, ports, signal) : { done: [], parts }
    if (begun !== undefined) await sendRest(film, keeper, begun, ports, signal)
    signal.throwIfAborted()
    ports.onArrived()
    return await ports.complete(film.clipId, signal)
  })
}

/** @returns undefined when the server has joined the parts already, and only its answer was lost */
async function askWhatThereIs(film: KeptFilm, ports: FilmPorts, signal: AbortSignal): Promise<PartsAnswer | undefined> {
  try {
    return await ports.askParts(film.clipId, planParts(film.clip.bytes, film.partBytes).map(part => part.number), signal)
  }
  catch (error) {
    if (readErrorAnswer(error).code === 'clip-done') return undefined
    throw error
  }
}

async function sendRest(film: KeptFilm, keeper: FilmKeeper, begun: PartsAnswer, ports: FilmPorts, signal: AbortSignal): Promise<void> {
  const { clipId, clip, partBytes } = film
  keeper.noteArrived(begun.done)
  let toldCount = begun.done.length
  const mayTell = seldom(TELL_EVERY_MS)
  const mayNote = seldom(NOTE_EVERY_MS)
  await sendParts({ fileBytes: clip.bytes, partBytes, parts: begun.parts, doneNumbers: begun.done }, {
    putPart: async (url, range, onSentBytes, stop) => putPart(await keeper.bytesOf(range, stop), url, onSentBytes, stop),
    askParts: (numbers, stop) => ports.askParts(clipId, numbers, stop),
    wait: ports.wait,
    random: ports.random,
  }, (progress) => {
    const { doneNumbers, isWaiting } = progress
    if (doneNumbers.length > toldCount) {
      toldCount = doneNumbers.length
      keeper.noteArrived(doneNumbers)
      // For the first picture after a reload; the store is asked in any case, so a note left out or failed is no matter.
      if (mayNote()) void updateKept(clipId, { doneNumbers: [...doneNumbers] }).catch(() => undefined)
    }
    if (mayTell() || isWaiting || doneNumbers.length === 0) ports.onProgress(progress)
  }, signal)
}

/** A screen need not be drawn anew, nor a database written to, as often as bytes move. @returns true once in so many ms */
function seldom(everyMs: number): () => boolean {
  let lastMs = -Infinity
  return () => {
    const nowMs = performance.now()
    if (nowMs - lastMs < everyMs) return false
    lastMs = nowMs
    return true
  }
}
