import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { newId } from '#server/ids'

/** What somebody did, for the owner's eyes. Ids only, never words: the table can not be erased. */
export type Deed
  = 'signed-in' | 'signed-out' | 'account-made' | 'address-confirmed' | 'password-changed' | 'password-reset'
    | 'picture-changed' | 'picture-removed' | 'account-changed' | 'invited' | 'invitation-accepted'
    | 'review-submitted' | 'review-taken-up' | 'review-put-back' | 'review-answered' | 'review-withdrawn'
    | 'clip-started' | 'clip-accepted' | 'clip-refused' | 'clip-given-up'
    | 'swings-told' | 'clip-abandoned' | 'clip-lost' | 'photo-added' | 'photo-removed' | 'photo-lost' | 'profile-changed'

/** Written in the same transaction as the deed. */
export async function recordDeed(db: Database, ctx: Ctx, deed: Deed, subjectId: string | null, actorId = ctx.viewer?.id ?? null): Promise<void> {
  await db.insertInto('audit_events')
    .values({ id: newId(ctx.nowMs), at_ms: ctx.nowMs, actor_id: actorId, deed, subject_id: subjectId, request_id: ctx.requestId })
    .execute()
}
