import type { Ctx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { recordDeed } from '#server/features/audit'
import { deleteUpload, updateClip } from '#server/features/reviews/clip.repository'
import type { AbandonedClip } from './sweep.repository'
import { deleteUploadingClip, listAbandonedClips, listKnownUploadIds } from './sweep.repository'

const BATCH = 100
/** What is left then is left for the next run. */
const MAX_BATCHES = 50

/**
 * Takes back what somebody began to send before `beforeMs` and left. The row goes first, so that whatever the store then does, nobody
 * goes on with it.
 */
export async function takeBackAbandoned(ctx: Ctx, beforeMs: number): Promise<void> {
  for (let batch = 0; batch < MAX_BATCHES; batch++) {
    const clips = await listAbandonedClips(ctx.db, beforeMs, BATCH)
    for (const clip of clips) await takeBack(ctx, clip)
    if (clips.length < BATCH) return
  }
}

async function takeBack(ctx: Ctx, clip: AbandonedClip): Promise<void> {
  const isTakenBack = await inTransaction(ctx.db, async (db) => {
    const isTheirs = clip.review_state === 'draft' || clip.review_state === 'new_film'
    // A review that moved on keeps the row: what its coach was sent does not change behind their back.
    const isDone = isTheirs
      ? await deleteUploadingClip(db, clip.id)
      : await updateClip(db, clip.id, 'uploading', { state: 'refused', refusal: 'unreadable', read_at_ms: ctx.nowMs })
    if (!isDone) return false
    await deleteUpload(db, clip.id)
    await recordDeed(db, ctx, 'clip-abandoned', clip.id)
    return true
  })
  if (!isTakenBack) return
  await ctx.storage.abortUpload(clip.object_key, clip.store_upload_id)
  // Its parts may have been joined by a server that ended before it said so.
  await ctx.storage.remove(clip.object_key)
}

/** Gives up uploads in the store that no row names: a server ended between beginning one and writing it down. */
export async function giveUpStrayUploads(ctx: Ctx, prefix: string, beforeMs: number): Promise<void> {
  for await (const uploads of ctx.storage.uploadPages(prefix)) {
    const known = new Set(await listKnownUploadIds(ctx.db, uploads.map(({ uploadId }) => uploadId)))
    const stray = uploads.filter(({ uploadId, begunAtMs }) => !known.has(uploadId) && begunAtMs < beforeMs)
    for (const { key, uploadId } of stray) await ctx.storage.abortUpload(key, uploadId)
  }
}
