import type { Ctx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { recordDeed } from '#server/features/audit'
import { updateClip } from '#server/features/reviews/clip.repository'
import { deletePhoto } from '#server/features/photos/photo.repository'

/** A clip that says it was accepted and whose film the store no longer has: the student is asked for it again. */
export async function markClipLost(ctx: Ctx, id: string): Promise<void> {
  await inTransaction(ctx.db, async (db) => {
    const isMarked = await updateClip(db, id, 'accepted', { state: 'refused', refusal: 'unreadable' })
    if (isMarked) await recordDeed(db, ctx, 'clip-lost', id)
  })
}

export async function removeLostPhoto(ctx: Ctx, id: string): Promise<void> {
  await inTransaction(ctx.db, async (db) => {
    if (await deletePhoto(db, id)) await recordDeed(db, ctx, 'photo-lost', id)
  })
}

/** Refuses a clip that could not be read however often it was tried, and takes it out of the store. */
export async function refuseUnread(ctx: Ctx, { id, object_key: key }: { id: string, object_key: string }): Promise<void> {
  await inTransaction(ctx.db, async (db) => {
    const isRefused = await updateClip(db, id, 'reading', { state: 'refused', refusal: 'unreadable', read_at_ms: ctx.nowMs })
    if (isRefused) await recordDeed(db, ctx, 'clip-refused', id)
  })
  await ctx.storage.remove(key)
}
