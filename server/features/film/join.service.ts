import { NotInStore } from '#server/adapters/storage'
import type { Ctx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import type { ClipRow } from '#server/features/reviews/clip.repository'
import { deleteUpload, markCompletionAsked, updateClip } from '#server/features/reviews/clip.repository'
import { partsMissing, uploadGone } from './film.errors'
import { reaching } from './reaching'

/** A reading takes seconds; what was begun two minutes ago and is not done ended with its server. */
export const CUT_SHORT_AFTER_MS = 2 * 60_000

/**
 * Joins a clip's parts in the store and hands it on to be read. May be called again at any point, also after a crash between any two
 * steps, and by two at once.
 * @throws Refusal `parts-missing` when the store does not hold the whole file, `upload-gone`, `store-unavailable`.
 */
export async function joinClip(ctx: Ctx, clip: ClipRow, uploadId: string | null): Promise<void> {
  await reaching(() => joinParts(ctx, clip, uploadId))
  await inTransaction(ctx.db, async (db) => {
    const change = { state: 'reading' as const, completed_at_ms: ctx.nowMs, read_due_at_ms: ctx.nowMs + CUT_SHORT_AFTER_MS }
    if (await updateClip(db, clip.id, 'uploading', change)) await deleteUpload(db, clip.id)
  })
}

async function joinParts(ctx: Ctx, clip: ClipRow, uploadId: string | null): Promise<void> {
  try {
    const parts = uploadId === null ? [] : await ctx.storage.listParts(clip.object_key, uploadId)
    const missingBytes = clip.bytes - parts.reduce((sum, part) => sum + part.bytes, 0)
    if (missingBytes !== 0 || parts.some((part, index) => part.number !== index + 1)) throw partsMissing(missingBytes)
    await inTransaction(ctx.db, db => markCompletionAsked(db, clip.id, ctx.nowMs))
    await ctx.storage.completeUpload(clip.object_key, uploadId ?? '', parts)
  }
  catch (error) {
    if (!(error instanceof NotInStore)) throw error
    // The server may have ended after joining and before saying so: then the upload is gone and the object is there.
    if (!await isJoined(ctx, clip)) throw uploadGone()
  }
}

/** Whether the store holds the clip whole. */
export async function isJoined(ctx: Ctx, clip: Pick<ClipRow, 'object_key' | 'bytes'>): Promise<boolean> {
  return await ctx.storage.findBytes(clip.object_key) === clip.bytes
}
