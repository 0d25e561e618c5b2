import type { FilmRefusal } from '#shared/domain/film/refusals'
import type { SpanS } from './clip-facts'
import type { KeptSpan } from './keep-plan'

/**
 * How a clip was made ready: made anew; copied frame by frame because it was fit already; copied whole, without sound and
 * tags, because this browser cannot make a new one; or given back as it was.
 */
export type PrepareWay = 're-encoded' | 'cut-and-stripped' | 'remuxed' | 'untouched'

export interface PreparedClip {
  file: File
  way: PrepareWay
  /** Frames in the file. */
  frames: number
  /** Where each kept stretch lay and lies now; one for the whole clip where nothing could be cut. */
  spans: KeptSpan[]
  /** What was asked to keep, in order, in the new file's seconds, half-open. */
  swings: SpanS[]
  /** Rate at which a phone filmed slow motion; the tag that told it is gone from the file. */
  captureFramesPerSecond: number | undefined
  /** Name of the file on this device's own storage, for `forgetPrepared`; undefined while it is in memory. */
  keptAs: string | undefined
  /** Why the server would not take it as it is; only ever set with `untouched`. */
  reason: FilmRefusal | undefined
  /** What better ways failed on, in the browser's words: for whoever looks into it, not for the person. */
  setbacks: string[]
}

/** Gets from the worker to the page as it is, since a file crosses without its bytes being copied. */
export interface PreparedBytes extends Omit<PreparedClip, 'file'> {
  bytes: Blob
}
