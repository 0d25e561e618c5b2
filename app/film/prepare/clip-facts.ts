import type { FilmFacts } from '#shared/domain/film/reading'

/** Seconds, half-open. */
export type SpanS = [fromS: number, toS: number]

/** What this browser would make a new film with; found once, since asking takes a moment. */
export interface ClipEncoder {
  codec: 'avc' | 'vp9'
  /** Told to the encoder so that it shares its bits out rightly; undefined where it only agrees without being told. */
  framesPerSecond: number | undefined
}

/** What the browser reads in a clip before anything is changed: what the server would read, and what this browser can do with it. */
export interface ClipFacts extends FilmFacts {
  /** When each frame is shown, in seconds as the file plays; strictly increasing, the edit list applied. */
  frameTimesS: number[]
  /** Shown the other way round than it is stored, as some front cameras write. */
  isMirrored: boolean
  hasSquarePixels: boolean
  isHighDynamicRange: boolean
  /** The longest way from one key frame to the next, or to the end. */
  longestKeyGapS: number
  /** Whether this browser can give single frames of it. */
  canDecode: boolean
  /** Undefined when this browser makes no film, or none of this size. */
  encoder: ClipEncoder | undefined
}
