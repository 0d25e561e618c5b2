import { readFile } from 'node:fs/promises'
import { z } from 'zod'
import type { DemoKey } from '#fakes/demo/people'
import type { ClipView } from '#shared/types/reviews'
import type { Answer } from './call'
import { call } from './call'
import type { World } from './world'

export const FILM = 'tests/support/film/made/plain-30.mp4'

export const LETTER = {
  title: 'Why it comes in twos',
  leaveAlone: 'Your set-up is in good order.',
  saw: 'With the shaft level on the way down the grip end hangs **behind** the ball.',
  why: 'The hands slow down before the ball.',
  howSure: 'fairly_sure',
  oneChange: 'Keep the grip end travelling past the ball.',
  drillTitle: 'Low punch',
  drillSteps: '1. Handle ahead.\n2. Strike the turf.',
  drillDose: '4 sessions a week, 10 minutes',
  caution: 'Stop if your back hurts.',
}

interface ClipOptions {
  view?: ClipView
  path?: string
  /** In place of a file. */
  bytes?: Buffer
  contentType?: string
}

const withId = z.object({ id: z.string() })
const clipUpload = z.object({ clip: withId, partBytes: z.number(), parts: z.array(z.object({ number: z.number(), url: z.string() })) })
const draftView = z.object({ version: z.number() })

export function idOf(answer: Answer): string {
  return withId.parse(answer.body).id
}

/** A draft with words, no film. */
export async function startDraft(world: World, as: DemoKey, change: Record<string, unknown> = {}): Promise<string> {
  const answer = await call(world, 'POST', '/api/reviews', {
    as, body: { title: 'Heavy and thin', question: 'It comes in twos. Why?', club: '7-iron', ...change },
  })
  if (answer.status !== 201) throw new Error(`No draft: ${answer.status} ${answer.text}`)
  return idOf(answer)
}

/** Sends a clip as the browser does, whole, and has it read. */
export async function sendClip(world: World, as: DemoKey, reviewId: string, options: ClipOptions = {}): Promise<Answer> {
  const { clipId } = await uploadClip(world, as, reviewId, options)
  return call(world, 'POST', `/api/clips/${clipId}/complete`, { as, body: {} })
}

/** Sends the parts of a clip and leaves it there. */
export async function uploadClip(world: World, as: DemoKey, reviewId: string, options: ClipOptions = {}) {
  const bytes = options.bytes ?? await readFile(options.path ?? FILM)
  const started = await call(world, 'POST', `/api/reviews/${reviewId}/clips`, {
    as, body: { view: options.view ?? 'face_on', fileName: 'swing.mp4', bytes: bytes.length, contentType: options.contentType ?? 'video/mp4' },
  })
  if (started.status !== 201) throw new Error(`No upload: ${started.status} ${started.text}`)
  const { clip, parts, partBytes } = clipUpload.parse(started.body)
  for (const part of parts) {
    const body = new Uint8Array(bytes.subarray((part.number - 1) * partBytes, part.number * partBytes))
    const sent = await fetch(part.url, { method: 'PUT', body })
    if (!sent.ok) throw new Error(`The store refused a part: ${await sent.text()}`)
  }
  return { clipId: clip.id }
}

export async function submitted(world: World, as: DemoKey, change: Record<string, unknown> = {}): Promise<{ id: string, clipId: string }> {
  const id = await startDraft(world, as, change)
  const clipId = idOf(await sendClip(world, as, id))
  const answer = await call(world, 'POST', `/api/reviews/${id}/submit`, { as, body: { payBy: 'credit' } })
  if (answer.status !== 200) throw new Error(`Not submitted: ${answer.status} ${answer.text}`)
  return { id, clipId }
}

export async function takenUp(world: World, student: DemoKey, coach: DemoKey, change: Record<string, unknown> = {}): Promise<{ id: string, clipId: string }> {
  const review = await submitted(world, student, change)
  const answer = await call(world, 'POST', `/api/reviews/${review.id}/take-up`, { as: coach, body: {} })
  if (answer.status !== 200) throw new Error(`Not taken up: ${answer.status} ${answer.text}`)
  return review
}

/** Saves a whole letter over what is there and tells its version. */
export async function saveLetter(world: World, coach: DemoKey, reviewId: string, letter: Record<string, unknown> = LETTER): Promise<number> {
  const { version } = draftView.parse((await call(world, 'GET', `/api/reviews/${reviewId}/draft`, { as: coach })).body)
  const saved = await call(world, 'PUT', `/api/reviews/${reviewId}/draft`, { as: coach, body: { version, letter } })
  if (saved.status !== 200) throw new Error(`Not saved: ${saved.status} ${saved.text}`)
  return draftView.parse(saved.body).version
}

export async function answered(world: World, student: DemoKey, coach: DemoKey): Promise<{ id: string, clipId: string }> {
  const review = await takenUp(world, student, coach)
  const version = await saveLetter(world, coach, review.id)
  const answer = await call(world, 'POST', `/api/reviews/${review.id}/answer`, { as: coach, body: { version } })
  if (answer.status !== 200) throw new Error(`Not answered: ${answer.status} ${answer.text}`)
  return review
}
