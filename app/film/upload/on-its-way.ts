import type { ClipBrief, ClipView } from '#shared/types/reviews'
import type { FailureWords } from './explain'

/**
 * `starting`: asking for addresses or for what the store has; `paused`: by the person; `elsewhere`: another tab of this browser
 * sends it; `reading`: all bytes are there and the server reads them; the last two are ends.
 */
export type UploadPhase = 'starting' | 'sending' | 'paused' | 'elsewhere' | 'reading' | 'done' | 'failed'

/** One file on its way to the store, as a screen sees it. */
export interface ClipOnItsWay {
  reviewId: string
  view: ClipView
  fileName: string
  bytes: number
  sentBytes: number
  phase: UploadPhase
  /** True while nothing moves because the line or the other side is away; it goes on by itself. */
  isWaiting: boolean
  /** True once the whole file lies on this device, so that the page may be closed. */
  isKept: boolean
  /** Undefined until the server knows the clip. */
  clip: ClipBrief | undefined
  /** When failed. */
  problem: FailureWords | undefined
}

export function newOnItsWay(reviewId: string, view: ClipView, { fileName, bytes }: { fileName: string, bytes: number }): ClipOnItsWay {
  return { reviewId, view, fileName, bytes, sentBytes: 0, phase: 'starting', isWaiting: false, isKept: false, clip: undefined, problem: undefined }
}

/** True while closing the page would lose the file: it has still to be sent and does not lie on this device yet. */
export function isLostWithPage({ phase, isKept }: ClipOnItsWay): boolean {
  return !isKept && (phase === 'starting' || phase === 'sending' || phase === 'paused')
}
