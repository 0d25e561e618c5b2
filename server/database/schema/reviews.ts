import type { Generated } from 'kysely'
import type { Contact, FlightCurve, FlightHeight, FlightStart, Surface } from '#shared/domain/review/ball-results'
import type { PhotoKind } from '#shared/domain/review/photo-kinds'

/** Questions, their film and their answers. The migration of this area holds the checks and indexes. */

export interface ReviewsTable {
  id: string
  student_id: string
  number: number
  state: 'draft' | 'unpaid' | 'waiting' | 'in_hand' | 'new_film' | 'answered' | 'closed' | 'withdrawn'
  version: Generated<number>
  chosen_coach_id: string | null
  coach_id: string | null
  offer_version_id: string | null
  title: Generated<string>
  question: Generated<string>
  area: string
  club: string
  misses: Generated<string>
  tried: Generated<string>
  film_asked_count: Generated<number>
  not_answered_count: Generated<number>
  state_before_new_film: 'waiting' | 'in_hand' | null
  created_at_ms: number
  submitted_at_ms: number | null
  taken_up_at_ms: number | null
  answered_at_ms: number | null
  closed_at_ms: number | null
}

export interface ClipsTable {
  id: string
  review_id: string
  view: 'face_on' | 'down_the_line'
  state: 'uploading' | 'reading' | 'accepted' | 'refused'
  file_name: string
  content_type: string
  bytes: number
  object_key: string
  refusal: string | null
  codec: string | null
  width_px: number | null
  height_px: number | null
  rotation_deg: number | null
  duration_ms: number | null
  frames_per_second: number | null
  capture_frames_per_second: number | null
  time_base: number | null
  frame_ticks: Uint8Array | null
  created_at_ms: number
  completed_at_ms: number | null
  read_at_ms: number | null
  prepared_as: 're_encoded' | 'cut' | 'remuxed' | 'original' | null
  /** While reading: when somebody else may take the reading over. */
  read_due_at_ms: number | null
  read_attempts: Generated<number>
}

export interface UploadsTable {
  clip_id: string
  store_upload_id: string
  part_bytes: number
  created_at_ms: number
  /** When the student asked to join the parts; null until then. */
  completion_asked_at_ms: number | null
}

export interface SwingsTable {
  id: string
  clip_id: string
  number: number
  from_ms: number
  to_ms: number
  contact: Contact | null
  flight_start: FlightStart | null
  flight_curve: FlightCurve | null
  flight_height: FlightHeight | null
  carry_m: number | null
  surface: Surface | null
}

export interface PhotosTable {
  id: string
  review_id: string
  kind: PhotoKind
  object_key: string
  width_px: number
  height_px: number
  bytes: number
  created_at_ms: number
}

export interface DraftsTable {
  review_id: string
  coach_id: string
  version: number
  letter: string
  saved_at_ms: number
}

export interface DiagnosesTable {
  id: string
  review_id: string
  sequence: number
  coach_id: string
  title: string
  leave_alone: string
  saw: string
  why: string
  how_sure: 'sure' | 'fairly_sure' | 'a_guess'
  one_change: string
  caution: string
  answered_at_ms: number
}

export interface PrescriptionsTable {
  id: string
  diagnosis_id: string
  drill_title: string
  drill_steps: string
  drill_dose: string
}

export interface ReviewsArea {
  reviews: ReviewsTable
  clips: ClipsTable
  uploads: UploadsTable
  swings: SwingsTable
  photos: PhotosTable
  drafts: DraftsTable
  diagnoses: DiagnosesTable
  prescriptions: PrescriptionsTable
}
