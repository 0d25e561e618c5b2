import type { FilmRefusal } from './refusals'

export type FilmContainer = 'mp4' | 'mov' | 'webm'

/** `unknown`: the file names a codec that no browser has. */
export type FilmCodec = 'avc' | 'hevc' | 'vp8' | 'vp9' | 'av1' | 'prores' | 'unknown'

/** What the file itself says, read from its tables; no frame is decoded. */
export interface FilmFacts {
  container: FilmContainer
  bytes: number
  codec: FilmCodec
  /** As WebCodecs wants it, such as `avc1.640028`; of an unknown codec the four letters of the file, or empty. */
  codecString: string
  /** Upright: after rotation, with pixels made square. */
  widthPx: number
  heightPx: number
  /** Clockwise turn that puts the stored picture upright. */
  rotationDeg: 0 | 90 | 180 | 270
  /** From the start of the first frame shown to the end of the last, as the file plays. */
  durationMs: number
  frameCount: number
  /** Median, as the file plays; 0 with fewer than two frames. */
  framesPerSecond: number
  /** Ticks in a second of the picture track. */
  timeBase: number
  /** When each frame is shown, in ticks; whole, strictly increasing, the edit list applied. */
  frameTicks: number[]
  /** Rate at which a phone filmed slow motion that the file plays stretched (`com.android.capture.fps`). */
  captureFramesPerSecond: number | undefined
  hasSound: boolean
  hasLocation: boolean
  /** Names of tags that tell make, model or system of the phone, sorted. */
  deviceTags: string[]
}

export type FilmReading
  = | { kind: 'accepted', film: FilmFacts }
    | { kind: 'refused', reason: FilmRefusal, detail?: string }
