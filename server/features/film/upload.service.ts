import type { z } from 'zod'
import type { Done } from '#shared/types/answers'
import type { ClipUpload, PartsAnswer, UploadPart } from '#shared/types/reviews'
import type { newClipSchema } from '#shared/schemas/clips'
import { PART_BYTES } from '#shared/schemas/clips'
import { NotInStore } from '#server/adapters/storage'
import type { SignedInCtx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import type { Database } from '#server/database/client'
import type { ClipRecord } from '#server/features/reviews/clip.repository'
import { deleteClip, findVisibleClip, insertClip, listClips } from '#server/features/reviews/clip.repository'
import { getReviewRecord } from '#server/features/reviews/review.service'
import { viewClipWithSwings } from '#server/features/reviews/review.view'
import { newId } from '#server/ids'
import { notFound } from '#server/refusal'
import { write } from '#server/write'
import { checkFilmConsent } from './consent'
import { alreadySent, clipDone, tooManyClips, uploadGone } from './film.errors'
import { isJoined } from './join.service'
import { reaching } from './reaching'

/** Two views, and room to send each again while the first is still there. */
const MAX_CLIPS = 4
/** Long enough for a part on a poor line; fresh addresses are to be had at any time. */
const PART_ADDRESS_SECONDS = 3600

const EXTENSIONS = { 'video/mp4': 'mp4', 'video/quicktime': 'mov', 'video/webm': 'webm' } as const

type NewClip = z.output<typeof newClipSchema> & { reviewId: string }

/** Opens an upload in the store and gives an address for each part. */
export async function startClip(ctx: SignedInCtx, input: NewClip): Promise<ClipUpload> {
  await ctx.limits.take('upload-account', ctx.viewer.id)
  await checkRoom(ctx.db, ctx, input.reviewId)
  const id = newId(ctx.nowMs)
  const key = `film/${input.reviewId}/${id}.${EXTENSIONS[input.contentType]}`
  const uploadId = await reaching(() => ctx.storage.createUpload(key, input.contentType))
  const parts = await addresses(ctx, key, uploadId, allNumbers(input.bytes, PART_BYTES))
  try {
    return await write(ctx, async (db) => {
      await checkRoom(db, ctx, input.reviewId)
      await insertClip(db, clipColumns(ctx, input, { id, key }), { storeUploadId: uploadId, partBytes: PART_BYTES })
      await recordDeed(db, ctx, 'clip-started', id)
      return { clip: await viewClipWithSwings(db, await getOwnClip(ctx, id, db)), partBytes: PART_BYTES, parts }
    })
  }
  catch (error) {
    // No row names it; if the store is down just now, the sweep finds it.
    await ctx.storage.abortUpload(key, uploadId).catch(left => ctx.log.warn({ clipId: id, err: left }, 'upload left in the store'))
    throw error
  }
}

function clipColumns(ctx: SignedInCtx, input: NewClip, { id, key }: { id: string, key: string }) {
  return {
    id,
    review_id: input.reviewId,
    view: input.view,
    state: 'uploading' as const,
    file_name: input.fileName,
    content_type: input.contentType,
    bytes: input.bytes,
    object_key: key,
    capture_frames_per_second: input.captureFramesPerSecond ?? null,
    prepared_as: input.preparedAs ?? null,
    created_at_ms: ctx.nowMs,
  }
}

/** Asked before the store is, and again with the row: a review may have been sent, or another clip begun, in between. */
async function checkRoom(db: Database, ctx: SignedInCtx, reviewId: string): Promise<void> {
  const record = await getReviewRecord(db, ctx, reviewId)
  if (record.student_id !== ctx.viewer.id) throw notFound('review')
  if (record.state !== 'draft') throw alreadySent()
  await checkFilmConsent(db, ctx, record.student_id)
  const clips = await listClips(db, reviewId)
  if (clips.filter(clip => clip.state !== 'refused').length >= MAX_CLIPS) throw tooManyClips()
}

/** What the store has of a clip, and fresh addresses for `numbers`: all that an upload needs to go on after a reload. */
export async function refreshParts(ctx: SignedInCtx, input: { id: string, numbers: number[] }): Promise<PartsAnswer> {
  const clip = await getOwnClip(ctx, input.id)
  if (clip.state !== 'uploading' || !clip.store_upload_id) throw clipDone()
  const { object_key: key, store_upload_id: uploadId } = clip
  const all = allNumbers(clip.bytes, clip.part_bytes ?? PART_BYTES)
  const stored = await reaching(async () => {
    try {
      return await ctx.storage.listParts(key, uploadId)
    }
    catch (error) {
      if (!(error instanceof NotInStore)) throw error
      throw await isJoined(ctx, clip) ? clipDone() : uploadGone()
    }
  })
  return {
    done: stored.map(part => part.number),
    parts: await addresses(ctx, key, uploadId, all.filter(number => input.numbers.includes(number))),
  }
}

/** Gives a clip up: the row first, so that whatever the store then does, nobody sees the clip again. */
export async function giveUpClip(ctx: SignedInCtx, { id }: { id: string }): Promise<Done> {
  const clip = await getOwnClip(ctx, id)
  if (clip.review_state !== 'draft') throw alreadySent()
  await write(ctx, async (db) => {
    await deleteClip(db, id)
    await recordDeed(db, ctx, 'clip-given-up', id)
  })
  try {
    if (clip.store_upload_id) await ctx.storage.abortUpload(clip.object_key, clip.store_upload_id)
    // Also then: its parts may just have been joined.
    await ctx.storage.remove(clip.object_key)
  }
  catch (error) {
    ctx.log.warn({ clipId: id, err: error }, 'film left in the store')
  }
  return { ok: true }
}

/** @throws Refusal `not-found` unless the clip belongs to a review of the viewer's own. */
export async function getOwnClip(ctx: SignedInCtx, id: string, db = ctx.db): Promise<ClipRecord> {
  const clip = await findVisibleClip(db, ctx.viewer, id)
  if (clip?.student_id !== ctx.viewer.id) throw notFound('clip')
  return clip
}

function allNumbers(bytes: number, partBytes: number): number[] {
  return Array.from({ length: Math.ceil(bytes / partBytes) }, (_, index) => index + 1)
}

async function addresses(ctx: SignedInCtx, key: string, uploadId: string, numbers: number[]): Promise<UploadPart[]> {
  return Promise.all(numbers.map(async number => ({
    number,
    url: await ctx.storage.presignPart(key, uploadId, number, PART_ADDRESS_SECONDS),
  })))
}
