import type { ClubBuild } from '#shared/domain/clubs/defaults'
import type { Handedness } from '#shared/domain/clubs/handedness'

export type FilmView = 'face_on' | 'down_the_line'

/** What the file and a look at its pictures tell; `FilmFacts` fits with nothing added. */
export interface AdvisedFilm {
  /** As the file plays; 0 when unknown. */
  framesPerSecond: number
  captureFramesPerSecond: number | undefined
  /** Upright, after rotation. */
  widthPx: number
  heightPx: number
  /** As the file plays. */
  durationMs: number
  /** Mean brightness of the picture from 0 (black) to 1 (white), when a frame was looked at. */
  meanLuma?: number
  /** Whether the golfer's side makes a mirrored picture likely, when somebody or something looked. */
  isLikelyMirrored?: boolean
  /** False when the golfer is known to lie on the side or stand on the head although the file's rotation was applied. */
  isUpright?: boolean
}

/** What the student said, and what was seen in the picture. All but the view, club and hand may be missing. */
export interface FilmContext {
  view: FilmView
  /** Key of a club; one that the list lacks gets advice without distances. */
  club: string
  handedness: Handedness
  /** Of a full swing with this club. */
  usualCarryM?: number
  /** The answer to "how fast was it filmed?". */
  saidFramesPerSecond?: number
  /** Top to impact of a full swing, in the file's own time. */
  downswingFileS?: number
  /** The student's own club; the default of the key without it. */
  clubBuild?: ClubBuild
  /** Grip end to sole at address. */
  clubSpanPx?: number
  /** Soles to top of the head at address, as a share of the picture's height. */
  personShareOfHeight?: number
  /** Standing. */
  personHeightM?: number
}

export type AdviceKey
  = | 'head-travel' | 'slow-motion' | 'landscape' | 'not-upright' | 'low-resolution' | 'picture'
    | 'dark' | 'mirrored' | 'too-short' | 'pixel-size' | 'too-close'

export interface Advice {
  key: AdviceKey
  /** `improve` never blocks: the film may be sent as it is. `ask`: the student knows what the file does not. */
  tone: 'good' | 'improve' | 'ask'
  /** One or two sentences: what is. */
  words: string
  /** Then what to do. */
  whatToDo?: string
}

export const VIEW_CLIP_WORDS: Readonly<Record<FilmView, string>> = {
  face_on: 'face-on clip',
  down_the_line: 'down-the-line clip',
}
