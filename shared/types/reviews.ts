import type { Contact, Flight, Surface } from '#shared/domain/review/ball-results'
import type { Letter } from '#shared/domain/review/letter'
import type { PhotoKind } from '#shared/domain/review/photo-kinds'
import type { ReviewMove, ReviewState } from '#shared/domain/review/states'
import type { DayLineSpan } from '#shared/domain/turnaround/day-line'
import type { PersonBrief } from './people'

export type ClipView = 'face_on' | 'down_the_line'

/** `uploading`: parts are arriving; `reading`: the server reads it; then one of the last two. */
export type ClipState = 'uploading' | 'reading' | 'accepted' | 'refused'

/** What the device did to a clip before sending it; `original` for nothing. */
export type PreparedAs = 're_encoded' | 'cut' | 'remuxed' | 'original'

/** One swing within a clip, with what the student says its ball did; null for what they do not know. */
export interface SwingBrief {
  id: string
  /** From 1, in order of time. */
  number: number
  /** Milliseconds of the clip as it plays, half-open. */
  fromMs: number
  toMs: number
  contact: Contact | null
  flight: Flight | null
  carryM: number | null
  surface: Surface | null
}

/** A photograph beside the clips; `GET /api/photos/:id/picture` leads to it. */
export interface PhotoBrief {
  id: string
  kind: PhotoKind
  widthPx: number
  heightPx: number
  createdAtMs: number
}

export interface ClipBrief {
  id: string
  view: ClipView
  state: ClipState
  fileName: string
  bytes: number
  /** Kebab-case reason of `shared/domain/film/refusals`, when refused. */
  refusal: string | null
  widthPx: number | null
  heightPx: number | null
  durationMs: number | null
  /** As the file plays. */
  framesPerSecond: number | null
  /** Rate at which it was filmed, where that is another than the file plays at. */
  captureFramesPerSecond: number | null
  preparedAs: PreparedAs | null
  /** At least one once the clip is accepted: the whole clip, until the student says more. */
  swings: SwingBrief[]
  createdAtMs: number
}

/** `POST /api/reviews/:id/clips`: where to send the parts. */
export interface ClipUpload {
  clip: ClipBrief
  partBytes: number
  parts: UploadPart[]
}

export interface UploadPart {
  number: number
  /** Presigned; send the bytes with PUT and no extra headers. */
  url: string
}

/** `POST /api/clips/:id/parts`. */
export interface PartsAnswer {
  done: number[]
  parts: UploadPart[]
}

export interface TurnaroundView {
  kind: 'answer' | 'follow_up' | 'check_in'
  status: 'running' | 'paused' | 'stopped'
  startedAtMs: number
  promisedAtMs: number
  stoppedAtMs: number | null
  /** Working time left to the promise; negative when late, standing still while paused, null once stopped. */
  timeInHandMs: number | null
  isLate: boolean
}

/** The letter as the coach writes it, with a title of its own. */
export interface LetterDraft extends Letter {
  title: string
}

/** The letter as the student reads it. */
export interface LetterView extends LetterDraft {
  answeredAtMs: number
  coach: PersonBrief
}

/** `GET /api/reviews/:id`. */
export interface ReviewView {
  id: string
  /** Counts a student's own reviews, from 1. */
  number: number
  state: ReviewState
  version: number
  student: PersonBrief & { isJunior: boolean }
  coach: PersonBrief | null
  /** The coach asked for; null means the first who is free. */
  chosenCoach: PersonBrief | null
  title: string
  question: string
  area: string
  club: string
  misses: string
  tried: string
  handedness: 'right' | 'left'
  /** Only for those who answer: what hurts or does not move. */
  limits: string | null
  clips: ClipBrief[]
  photos: PhotoBrief[]
  turnaround: TurnaroundView | null
  letter: LetterView | null
  createdAtMs: number
  submittedAtMs: number | null
  /** Moves this reader may make now. */
  moves: ReviewMove[]
}

/** `POST /api/reviews/:id/submit`: by credit the review waits; by card `checkoutUrl` is the provider's page to go to. */
export interface SubmitAnswer {
  review: ReviewView
  checkoutUrl: string | null
}

/** A row of `GET /api/reviews`. */
export interface ReviewRow {
  id: string
  number: number
  state: ReviewState
  title: string
  studentName: string
  coachName: string | null
  club: string
  promisedAtMs: number | null
  answeredAtMs: number | null
  createdAtMs: number
}

/** `GET, PUT /api/reviews/:id/draft`. */
export interface DraftView {
  version: number
  letter: LetterDraft
  savedAtMs: number | null
}

/** A row of `GET /api/desk/queue`, in order of promise. */
export interface QueueRow {
  reviewId: string
  turnaroundId: string
  kind: 'answer' | 'follow_up' | 'check_in'
  state: ReviewState
  studentName: string
  isJunior: boolean
  title: string
  club: string
  coachId: string | null
  coachName: string | null
  isMine: boolean
  views: ClipView[]
  startedAtMs: number
  promisedAtMs: number
  /** Working time left; negative when late. */
  timeInHandMs: number
  spans: DayLineSpan[]
}

/** `GET /api/desk/queue`: one page, and the figures of the heading. */
export interface QueueAnswer {
  items: QueueRow[]
  nextCursor: string | null
  nowMs: number
  /** How many promises fall before the reader's working day ends. */
  dueTodayCount: number
  /** End of the reader's working day; null when not working today. */
  closesAtMs: number | null
  workingMsLeftToday: number
  waitingCount: number
}

export type { HowSure } from '#shared/domain/review/letter'
export type { ReviewState } from '#shared/domain/review/states'
export type { DayLineSpan as QueueSpan } from '#shared/domain/turnaround/day-line'
