import type { ClipBrief, ClipUpload, ClipView, PartsAnswer } from '#shared/types/reviews'
import { readFailure } from '~/film/upload/explain'
import { keepTrying } from '~/film/upload/keep-trying'
import type { ToldOfClip } from '~/film/upload/works'
import { waitForNextTry } from '~/film/upload/wait'

export interface NewClipBody extends ToldOfClip {
  view: ClipView
  fileName: string
  bytes: number
  contentType: string
}

/** Whoever asks: called off by `signal`, told when a wait begins and ends. */
export interface Asking {
  signal: AbortSignal
  onWait: (isWaiting: boolean) => void
}

/** A line can die without a word; then the same question is asked again. Joining and reading a film takes longest. */
const ANSWER_WITHIN_MS = 30_000
const READ_WITHIN_MS = 120_000

/** What every question goes out with. */
interface Sent {
  method: 'POST'
  headers: Record<string, string>
  signal: AbortSignal
  timeout: number
}

/** The server's side of sending a clip, asked again under one key while no definite answer comes. */
export function useUploadApi() {
  /** @param key the same for one choice of a file, so that asking again begins no second clip */
  const begin = (reviewId: string, body: NewClipBody, key: string, asking: Asking) =>
    patiently(sent => $fetch<ClipUpload>(`/api/reviews/${reviewId}/clips`, { ...sent, body }), ANSWER_WITHIN_MS, asking, key)

  const askParts = (clipId: string, numbers: number[], asking: Asking) =>
    patiently(sent => $fetch<PartsAnswer>(`/api/clips/${clipId}/parts`, { ...sent, body: { numbers } }), ANSWER_WITHIN_MS, asking)

  const complete = (clipId: string, asking: Asking) =>
    patiently(sent => $fetch<ClipBrief>(`/api/clips/${clipId}/complete`, { ...sent, body: {} }), READ_WITHIN_MS, asking)

  return { begin, askParts, complete }
}

async function patiently<T>(act: (sent: Sent) => Promise<T>, timeout: number, { signal, onWait }: Asking, key: string = crypto.randomUUID()): Promise<T> {
  const wait = async (waitMs: number) => {
    onWait(true)
    await waitForNextTry(waitMs, signal)
    onWait(false)
  }
  const sent: Sent = { method: 'POST', headers: { 'Idempotency-Key': key }, signal, timeout }
  return await keepTrying(() => act(sent), readFailure, { wait, random: () => Math.random() }, signal)
}
