import type { DemoKey } from '#fakes/demo/people'
import { HEAVY_LETTER } from '#fakes/demo/letters'
import type { Rehearsal } from '#fakes/demo/seed'
import { insertStudio } from '#fakes/demo/seed'
import { createApp } from '#server/app'
import type { Database } from '#server/database/client'
import { inTransaction } from '#server/database/transaction'
import { insertReview } from '#server/features/reviews/review.repository'
import { saveDraftOver } from '#server/features/reviews/letter.repository'
import { beginAnswerClock } from '#server/features/turnaround/turnaround.service'
import { newId } from '#server/ids'
import { readSettings } from '#server/settings'

const STUDENTS = ['student', 'student2', 'student3'] as const satisfies readonly DemoKey[]
const MINUTE_MS = 60_000
const TURNAROUND_MS = 9 * 60 * MINUTE_MS
/** In one transaction, so that making some thousand reviews does not wait for the disk some thousand times. */
const AT_ONCE = 200
/** Four seconds of 60 frames: what a review reads with each clip. */
const FRAME_COUNT = 240
const TIME_BASE = 57_600

/**
 * Makes the invented studio with `count` reviews that wait for whichever coach is free, two clips each, and for each the first coach's
 * finished draft. The rows are those of the product's own writes; only the film itself is missing from the store.
 * @returns the ids of the reviews, in order of promise.
 */
export async function makeStudio(environment: Record<string, string>, count: number): Promise<string[]> {
  const app = createApp(readSettings(environment, '.output/server/index.mjs'))
  try {
    await app.ready
    const nowMs = Date.now()
    const rehearsal = await insertStudio(app, nowMs)
    const { id: versionId } = await app.db.selectFrom('offer_versions').select('id').orderBy('id').limit(1).executeTakeFirstOrThrow()
    const ids: string[] = []
    while (ids.length < count) {
      await inTransaction(app.db, async (db) => {
        for (let made = 0; made < AT_ONCE && ids.length < count; made += 1) {
          // Spread over the last hours, as they would come in.
          const atMs = nowMs - 240 * MINUTE_MS + Math.round((ids.length / count) * 180 * MINUTE_MS)
          ids.push(await insertWaitingReview(db, rehearsal, { index: ids.length, atMs, versionId }))
        }
      })
    }
    return ids
  }
  finally {
    await app.close()
  }
}

async function insertWaitingReview(db: Database, { as, ids }: Rehearsal, at: { index: number, atMs: number, versionId: string }): Promise<string> {
  const key = STUDENTS[at.index % STUDENTS.length] ?? 'student'
  const id = newId(at.atMs)
  await insertReview(db, {
    id,
    student_id: ids[key],
    number: at.index + 1,
    state: 'waiting',
    chosen_coach_id: null,
    offer_version_id: at.versionId,
    title: `Heavy, then thin, number ${at.index}`,
    question: 'The first is an inch behind the ball, and the next one I lift and catch it thin. It is worse on the second nine.',
    area: 'full_swing',
    club: '7-iron',
    misses: 'Heavy about one in three, thin one in five.',
    tried: 'Ball further forward.',
    created_at_ms: at.atMs,
    submitted_at_ms: at.atMs,
  })
  for (const view of ['face_on', 'down_the_line'] as const) await insertAcceptedClip(db, id, view, at.atMs)
  await beginAnswerClock(db, as(key, at.atMs), {
    reviewId: id, chosenCoachId: null, turnaroundMs: TURNAROUND_MS, atMs: at.atMs,
  })
  await saveDraftOver(db, { reviewId: id, coachId: ids.coach, version: 0, letter: JSON.stringify(HEAVY_LETTER), nowMs: at.atMs })
  return id
}

async function insertAcceptedClip(db: Database, reviewId: string, view: 'face_on' | 'down_the_line', atMs: number): Promise<void> {
  const id = newId(atMs)
  const ticks = Array.from({ length: FRAME_COUNT }, (_, frame) => frame * (TIME_BASE / 60))
  await db.insertInto('clips').values({
    id,
    review_id: reviewId,
    view,
    state: 'accepted',
    file_name: `${view}.mp4`,
    content_type: 'video/mp4',
    bytes: 4_000_000,
    object_key: `clips/${id}`,
    codec: 'avc1.64001f',
    width_px: 720,
    height_px: 1280,
    rotation_deg: 0,
    duration_ms: 4000,
    frames_per_second: 60,
    time_base: TIME_BASE,
    frame_ticks: new Uint8Array(new Float64Array(ticks).buffer),
    created_at_ms: atMs,
    completed_at_ms: atMs,
    read_at_ms: atMs,
  }).execute()
}
