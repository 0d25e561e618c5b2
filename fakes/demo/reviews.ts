import { readFile } from 'node:fs/promises'
import { addWorkingMs } from '#shared/domain/turnaround/adding'
import type { ClipView, LetterDraft } from '#shared/types/reviews'
import { inTransaction } from '#server/database/transaction'
import { completeClip } from '#server/features/film/film.service'
import { startClip } from '#server/features/film/upload.service'
import { takeUp } from '#server/features/reviews/desk.service'
import { saveDraft, sendAnswer } from '#server/features/reviews/letter.service'
import { updateReview } from '#server/features/reviews/review.repository'
import { startReview } from '#server/features/reviews/review.service'
import { submitReview } from '#server/features/reviews/submit.service'
import { askedForFilm, startedWithUsed, withdrawn } from './clocks'
import { DEMO_CLIPS } from './film/clips'
import { demoHours } from './offers'
import { EARLIER_LETTER, HALF_WRITTEN, HEAVY_LETTER } from './letters'
import type { DemoKey } from './people'
import type { Rehearsal } from './seed'

const HOUR_MS = 60 * 60 * 1000
const DAY_MS = 24 * HOUR_MS

interface Question {
  by: DemoKey
  title: string
  question: string
  club: string
  misses?: string
  area?: 'full_swing' | 'driving' | 'sand' | 'part_shots'
  coach?: 'coach' | 'coach2'
}

/** Reviews in every state, asked over the last weeks. */
export async function insertDemoReviews(rehearsal: Rehearsal): Promise<void> {
  const { nowMs } = rehearsal
  await insertFinished(rehearsal)
  await insertOpen(rehearsal)
  await ask(rehearsal, {
    by: 'student', title: 'Wedges come up short', question: 'From eighty yards I am always short. The swing feels long enough.', club: 'sand-wedge', area: 'part_shots',
  }, nowMs - 2 * HOUR_MS, [])
}

async function insertFinished(rehearsal: Rehearsal): Promise<void> {
  const { nowMs } = rehearsal
  const first = await send(rehearsal, {
    by: 'student', title: 'Why do I top my 5-wood?', question: 'Off the ground I top about one in three. Off a tee it is fine.', club: '5-wood', misses: 'Topped, sometimes thin', coach: 'coach',
  }, nowMs - 30 * DAY_MS)
  await answer(rehearsal, first, EARLIER_LETTER, inTime(nowMs - 30 * DAY_MS, 5 * HOUR_MS))
  await move(rehearsal, first, 'answered', { state: 'closed', closed_at_ms: nowMs - 20 * DAY_MS })

  const second = await send(rehearsal, {
    by: 'student', title: 'Heavy and thin in the same round', question: 'With my irons I hit one heavy, and the next one thin. It comes in twos. What am I doing?', club: '7-iron', misses: 'Fat, then thin', coach: 'coach',
  }, nowMs - 3 * DAY_MS)
  await answer(rehearsal, second, HEAVY_LETTER, inTime(nowMs - 3 * DAY_MS, 6.5 * HOUR_MS))

  const takenBack = await send(rehearsal, {
    by: 'student2', title: 'Driver goes low and left', question: 'It starts left and stays there.', club: 'driver', area: 'driving',
  }, nowMs - 9 * DAY_MS)
  await inTransaction(rehearsal.app.db, db => withdrawn(db, takenBack, nowMs - 9 * DAY_MS + HOUR_MS))
}

async function insertOpen(rehearsal: Rehearsal): Promise<void> {
  const { nowMs } = rehearsal
  const usedOf = (coach: 'coach' | 'coach2' | null, usedMs: number) => startedWithUsed(demoHours(coach), nowMs, usedMs)
  const inHand = await send(rehearsal, {
    by: 'student2', title: 'Topping my 5-wood off tight lies', question: 'On short grass I catch the top half of the ball. Longer grass is fine.', club: '5-wood', misses: 'Topped', coach: 'coach',
  }, usedOf('coach', 7.25 * HOUR_MS))
  await takeUp(rehearsal.as('coach', nowMs - 40 * 60_000), { id: inHand })
  await saveDraft(rehearsal.as('coach', nowMs - 30 * 60_000), { id: inHand, version: 0, letter: HALF_WRITTEN })

  await send(rehearsal, {
    by: 'student', title: 'Ball starts right, then turns over', question: 'Since the last lesson I start it right and it hooks back. Is that the drill?', club: '7-iron', misses: 'Starts right, curves left', coach: 'coach',
  }, usedOf('coach', 5.5 * HOUR_MS))
  await send(rehearsal, {
    by: 'student3', title: 'Low shots under the wind', question: 'What changes when I want it low? I lose ten yards and it still climbs.', club: '6-iron',
  }, usedOf(null, 3 * HOUR_MS))
  await send(rehearsal, {
    by: 'junior', title: 'My driver goes everywhere', question: 'Some left, some right. I want to know which one thing to practise.', club: 'driver', area: 'driving', coach: 'coach2',
  }, usedOf('coach2', 1.5 * HOUR_MS))

  const askedAtMs = usedOf('coach', 4 * HOUR_MS)
  const awaitingFilm = await send(rehearsal, {
    by: 'student2', title: 'Bunker shots come out with no height', question: 'Two inches behind the ball and it still comes out low.', club: 'sand-wedge', area: 'sand', coach: 'coach',
  }, usedOf('coach', 6 * HOUR_MS))
  await inTransaction(rehearsal.app.db, db => askedForFilm(db, awaitingFilm, askedAtMs))

  const unpaid = await ask(rehearsal, {
    by: 'student3', title: 'Pushes with the hybrid', question: 'Straight, but to the right.', club: 'hybrid',
  }, nowMs - HOUR_MS, ['face_on'])
  await move(rehearsal, unpaid, 'draft', { state: 'unpaid' })
}

async function ask(rehearsal: Rehearsal, question: Question, atMs: number, views: ClipView[]): Promise<string> {
  const ctx = rehearsal.as(question.by, atMs)
  const { id } = await startReview(ctx, {
    title: question.title,
    question: question.question,
    club: question.club,
    area: question.area ?? 'full_swing',
    misses: question.misses ?? '',
    tried: '',
    chosenCoachId: question.coach ? rehearsal.ids[question.coach] : null,
  })
  for (const view of views) await film(rehearsal, question, id, view, atMs)
  return id
}

async function send(rehearsal: Rehearsal, question: Question, atMs: number): Promise<string> {
  const id = await ask(rehearsal, question, atMs, ['face_on', 'down_the_line'])
  await submitReview(rehearsal.as(question.by, atMs), { id, payBy: 'credit' })
  return id
}

/** Sends a clip as the browser does: parts by presigned address, then the server reads it. */
async function film(rehearsal: Rehearsal, { by, club }: Question, reviewId: string, view: ClipView, atMs: number): Promise<void> {
  const kind = by === 'student3' ? 'left' : club === 'driver' ? 'driver' : 'right'
  const bytes = await readFile(DEMO_CLIPS[kind][view])
  const { clip, parts, partBytes } = await startClip(rehearsal.as(by, atMs), {
    reviewId, view, fileName: `${view.replaceAll('_', '-')}.mp4`, bytes: bytes.length, contentType: 'video/mp4',
  })
  for (const part of parts) {
    const body = bytes.subarray((part.number - 1) * partBytes, part.number * partBytes)
    const sent = await fetch(part.url, { method: 'PUT', body: new Uint8Array(body) })
    if (!sent.ok) throw new Error(`The store refused a part of a demo clip: ${await sent.text()}`)
  }
  const { state, refusal } = await completeClip(rehearsal.as(by, atMs), { id: clip.id })
  if (state !== 'accepted') throw new Error(`A demo clip was not accepted: ${refusal ?? state}`)
}

async function answer(rehearsal: Rehearsal, id: string, letter: LetterDraft, atMs: number): Promise<void> {
  await takeUp(rehearsal.as('coach', atMs - 14 * 60_000), { id })
  const { version } = await saveDraft(rehearsal.as('coach', atMs - 60_000), { id, version: 0, letter })
  await sendAnswer(rehearsal.as('coach', atMs), { id, version })
}

/** The moment at which the demo's coach has used that much working time. */
function inTime(startMs: number, usedMs: number): number {
  const outcome = addWorkingMs(demoHours('coach'), startMs, usedMs)
  if (!outcome.ok) throw new Error(`The demo's coach has no hours: ${outcome.reason}.`)
  return outcome.atMs
}

type ReviewChange = Parameters<typeof updateReview>[3]

/** States whose moves have no screen yet are set as a repository would. */
async function move(rehearsal: Rehearsal, id: string, from: 'draft' | 'answered', change: ReviewChange): Promise<void> {
  await inTransaction(rehearsal.app.db, async (db) => {
    if (!await updateReview(db, id, from, change)) throw new Error(`Demo review ${id} is not ${from}.`)
  })
}
