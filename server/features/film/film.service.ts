import type { ClipBrief } from '#shared/types/reviews'
import type { SignedInCtx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { findVisibleClip, insertViewing } from '#server/features/reviews/clip.repository'
import { viewClipWithSwings } from '#server/features/reviews/review.view'
import { newId } from '#server/ids'
import { notFound } from '#server/refusal'
import { checkFilmConsent } from './consent'
import { joinClip } from './join.service'
import { readClip } from './reading.service'
import { getOwnClip } from './upload.service'

/** Long enough to play a clip through, short enough that a passed-on address is soon worth nothing. */
const FILM_ADDRESS_SECONDS = 300

/**
 * Joins the parts and reads the film. May be called again at any point, also after a crash between any two steps.
 * @returns the clip, accepted or refused with its reason.
 */
export async function completeClip(ctx: SignedInCtx, { id }: { id: string }): Promise<ClipBrief> {
  const sent = await getOwnClip(ctx, id)
  if (sent.state === 'uploading') await joinClip(ctx, sent, sent.store_upload_id)
  const joined = sent.state === 'uploading' ? await getOwnClip(ctx, id) : sent
  if (joined.state === 'reading') await readClip(ctx, joined)
  return viewClipWithSwings(ctx.db, await getOwnClip(ctx, id))
}

/** A short-lived address of a clip; the viewing is written down. @throws Refusal `not-found`, `consent-needed`. */
export async function showFilm(ctx: SignedInCtx, { id }: { id: string }): Promise<string> {
  const clip = await findVisibleClip(ctx.db, ctx.viewer, id)
  if (clip?.state !== 'accepted') throw notFound('clip')
  await checkFilmConsent(ctx.db, ctx, clip.student_id)
  await inTransaction(ctx.db, db => insertViewing(db, { id: newId(ctx.nowMs), clipId: id, viewerId: ctx.viewer.id, atMs: ctx.nowMs }))
  return ctx.storage.presignGet(clip.object_key, FILM_ADDRESS_SECONDS)
}
