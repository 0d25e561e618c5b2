import type { PhotoKind } from '#shared/domain/review/photo-kinds'
import { PHOTO_MAX_COUNT } from '#shared/domain/review/photo-kinds'
import type { Done } from '#shared/types/answers'
import type { PhotoBrief } from '#shared/types/reviews'
import { StoreUnavailable } from '#server/adapters/storage'
import type { Ctx, SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { checkFilmConsent } from '#server/features/film/consent'
import { getReviewRecord } from '#server/features/reviews/review.service'
import { remakePicture } from '#server/features/uploads/remake-picture'
import { newId } from '#server/ids'
import { invalidFields, notFound } from '#server/refusal'
import type { Upload } from '#server/utils/read-upload'
import { write } from '#server/write'
import { photoNotStored, reviewSent, tooManyPhotos } from './photo.errors'
import { deletePhoto, findVisiblePhoto, insertPhoto, listPhotos } from './photo.repository'
import { viewPhoto } from './photo.view'

/** Enough to see single grass blades beside a ball, and a few hundred kilobytes. */
const SIDE_PX = 1600
const ADDRESS_LASTS_SECONDS = 300

/** Asked before the form is read, so that nobody sends a photograph to hear that it cannot be taken. @throws Refusal. */
export async function checkPhotoWanted(ctx: SignedInCtx, reviewId: string): Promise<void> {
  await ctx.limits.take('photo-account', ctx.viewer.id)
  await checkRoom(ctx.db, ctx, reviewId)
}

/** @throws Refusal `not-a-picture` (415), `too-many-pixels` (422), `invalid-fields` (422) without a file, `too-many-photos`, `wrong-moment` (409). */
export async function addPhoto(ctx: SignedInCtx, input: { reviewId: string, kind: PhotoKind, uploads: readonly Upload[] }): Promise<PhotoBrief> {
  const upload = input.uploads.find(({ field }) => field === 'photo')
  if (!upload) throw invalidFields({ photo: 'Choose a photograph.' })
  const made = await remakePicture(upload.bytes, { widthPx: SIDE_PX, heightPx: SIDE_PX, fit: 'inside', field: 'photo' })
  const id = newId(ctx.nowMs)
  const row = {
    id, review_id: input.reviewId, kind: input.kind, object_key: `photos/${input.reviewId}/${id}.webp`,
    width_px: made.widthPx, height_px: made.heightPx, bytes: made.bytes.length, created_at_ms: ctx.nowMs,
  }
  await ctx.storage.put(row.object_key, made.bytes, 'image/webp').catch((error: unknown) => {
    throw error instanceof StoreUnavailable ? photoNotStored() : error
  })
  try {
    return await write(ctx, async (db) => {
      await checkRoom(db, ctx, input.reviewId)
      await insertPhoto(db, row)
      await recordDeed(db, ctx, 'photo-added', id)
      return viewPhoto(row)
    })
  }
  catch (error) {
    await removeObject(ctx, row.object_key)
    throw error
  }
}

export async function removePhoto(ctx: SignedInCtx, { id }: { id: string }): Promise<Done> {
  const photo = await findVisiblePhoto(ctx.db, ctx.viewer, id)
  if (photo?.student_id !== ctx.viewer.id) throw notFound('photograph')
  await write(ctx, async (db) => {
    const { state } = await getReviewRecord(db, ctx, photo.review_id)
    if (state !== 'draft') throw reviewSent()
    if (await deletePhoto(db, id)) await recordDeed(db, ctx, 'photo-removed', id)
  })
  await removeObject(ctx, photo.object_key)
  return { ok: true }
}

/** An address in the store, good for five minutes. @throws Refusal `not-found`, `consent-needed`. */
export async function getPhotoAddress(ctx: SignedInCtx, { id }: { id: string }): Promise<string> {
  const photo = await findVisiblePhoto(ctx.db, ctx.viewer, id)
  if (!photo) throw notFound('photograph')
  await checkFilmConsent(ctx.db, ctx, photo.student_id)
  return ctx.storage.presignGet(photo.object_key, ADDRESS_LASTS_SECONDS)
}

async function checkRoom(db: Database, ctx: SignedInCtx, reviewId: string): Promise<void> {
  const record = await getReviewRecord(db, ctx, reviewId)
  if (record.student_id !== ctx.viewer.id) throw notFound('review')
  if (record.state !== 'draft') throw reviewSent()
  await checkFilmConsent(db, ctx, record.student_id)
  if ((await listPhotos(db, reviewId)).length >= PHOTO_MAX_COUNT) throw tooManyPhotos()
}

/** No row points to it, so a store that is down only leaves it to the sweep. */
async function removeObject(ctx: Ctx, key: string): Promise<void> {
  await ctx.storage.remove(key).catch((error: unknown) => {
    ctx.log.warn({ requestId: ctx.requestId, key, err: error }, 'photograph left in the store')
  })
}
