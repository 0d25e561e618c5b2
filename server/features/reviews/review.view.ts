import { ageInYears } from '#shared/domain/people/age'
import type { ReviewFacts } from '#shared/domain/review/states'
import { movesFrom } from '#shared/domain/review/states'
import type { ClipBrief, LetterView, ReviewView, SwingBrief, TurnaroundView } from '#shared/types/reviews'
import type { SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import type { SwingRow } from '#server/features/film/swing.repository'
import { listSwings, listSwingsOfReview } from '#server/features/film/swing.repository'
import { listPhotos } from '#server/features/photos/photo.repository'
import { viewPhoto } from '#server/features/photos/photo.view'
import type { TurnaroundRow } from '#server/features/turnaround/turnaround.repository'
import { findTurnaround } from '#server/features/turnaround/turnaround.repository'
import { readTimeInHandMs } from '#server/features/turnaround/turnaround.service'
import type { ClipBriefRow } from './clip.repository'
import { listClips } from './clip.repository'
import type { LetterRecord } from './letter.repository'
import { findLetter, toLetter } from './letter.repository'
import { mayReadLimits, rolesFor } from './review.policy'
import type { ReviewRecord } from './review.repository'

/** A review as one reader sees it. `record` must have been found for that reader. */
export async function viewReview(db: Database, ctx: SignedInCtx, record: ReviewRecord): Promise<ReviewView> {
  const [clips, swings, photos, turnaround, letter] = [
    await listClips(db, record.id),
    await listSwingsOfReview(db, record.id),
    await listPhotos(db, record.id),
    await findTurnaround(db, record.id, 'answer'),
    record.answered_at_ms === null ? undefined : await findLetter(db, record.id),
  ]
  const facts = reviewFacts(record)
  return {
    id: record.id,
    number: record.number,
    state: record.state,
    version: record.version,
    student: {
      id: record.student_id,
      name: record.student_name,
      hasPicture: record.student_picture_key !== null,
      isJunior: ageInYears(record.birth_date, ctx.nowMs, record.student_time_zone) < record.adult_age,
    },
    coach: person(record.coach_id, record.coach_name, record.coach_picture_key),
    chosenCoach: person(record.chosen_coach_id, record.chosen_name, record.chosen_picture_key),
    title: record.title,
    question: record.question,
    area: record.area,
    club: record.club,
    misses: record.misses,
    tried: record.tried,
    handedness: record.handedness,
    limits: mayReadLimits(ctx.viewer) ? record.limits : null,
    clips: clips.map(clip => viewClip(clip, swings.filter(swing => swing.clip_id === clip.id))),
    photos: photos.map(viewPhoto),
    turnaround: turnaround ? await viewTurnaround(db, turnaround, ctx.nowMs) : null,
    letter: letter ? viewLetter(letter) : null,
    createdAtMs: record.created_at_ms,
    submittedAtMs: record.submitted_at_ms,
    moves: [...new Set(rolesFor(ctx.viewer).flatMap(role => movesFrom(record.state, role, facts)))],
  }
}

export function reviewFacts(record: ReviewRecord): ReviewFacts {
  return {
    filmAskedCount: record.film_asked_count,
    notAnsweredCount: record.not_answered_count,
    stateBeforeNewFilm: record.state_before_new_film,
  }
}

/** A clip with the swings that are told of it now. */
export async function viewClipWithSwings(db: Database, row: ClipBriefRow): Promise<ClipBrief> {
  return viewClip(row, await listSwings(db, row.id))
}

function viewClip(row: ClipBriefRow, swings: SwingRow[]): ClipBrief {
  return {
    id: row.id,
    view: row.view,
    state: row.state,
    fileName: row.file_name,
    bytes: row.bytes,
    refusal: row.refusal,
    widthPx: row.width_px,
    heightPx: row.height_px,
    durationMs: row.duration_ms,
    framesPerSecond: row.frames_per_second,
    captureFramesPerSecond: row.capture_frames_per_second,
    preparedAs: row.prepared_as,
    swings: swings.map(viewSwing).sort((a, b) => a.number - b.number),
    createdAtMs: row.created_at_ms,
  }
}

function viewSwing(row: SwingRow): SwingBrief {
  const { flight_start: start, flight_curve: curve, flight_height: height } = row
  return {
    id: row.id,
    number: row.number,
    fromMs: row.from_ms,
    toMs: row.to_ms,
    contact: row.contact,
    flight: start === null || curve === null || height === null ? null : { start, curve, height },
    carryM: row.carry_m,
    surface: row.surface,
  }
}

async function viewTurnaround(db: Database, row: TurnaroundRow, nowMs: number): Promise<TurnaroundView> {
  return {
    kind: row.kind,
    status: row.status,
    startedAtMs: row.started_at_ms,
    promisedAtMs: row.promised_at_ms,
    stoppedAtMs: row.stopped_at_ms,
    timeInHandMs: await readTimeInHandMs(db, row, nowMs),
    isLate: row.status !== 'paused' && (row.stopped_at_ms ?? nowMs) > row.promised_at_ms,
  }
}

function viewLetter(row: LetterRecord): LetterView {
  return {
    title: row.title,
    ...toLetter(row),
    answeredAtMs: row.answered_at_ms,
    coach: { id: row.coach_id, name: row.coach_name, hasPicture: row.coach_picture_key !== null },
  }
}

function person(id: string | null, name: string | null, pictureKey: string | null) {
  return id === null || name === null ? null : { id, name, hasPicture: pictureKey !== null }
}
