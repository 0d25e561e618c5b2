import type { Ctx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import type { ClipRow } from '#server/features/reviews/clip.repository'
import { listUnjoinedClips, listUnreadClips, markCompletionAsked, takeReading } from '#server/features/reviews/clip.repository'
import { Refusal } from '#server/refusal'
import { CUT_SHORT_AFTER_MS, joinClip } from './join.service'
import { readClip } from './reading.service'
import { refuseUnread } from './sweep/lost-film'

const BATCH = 20
const LONGEST_WAIT_MS = 60 * 60_000
/** With the waits between them, about a day: a store that is down so long is no fault of the film, and nobody waits longer. */
const MAX_ATTEMPTS = 28

/** Finishes what ended with its server: clips whose parts were being joined, and clips that were being read. */
export async function readWaitingClips(ctx: Ctx): Promise<void> {
  for (const clip of await listUnjoinedClips(ctx.db, ctx.nowMs - CUT_SHORT_AFTER_MS, BATCH)) {
    await joinClip(ctx, clip, clip.store_upload_id)
      .then(() => readClip(ctx, clip))
      .catch((error: unknown) => giveBack(ctx, clip, error))
  }
  for (const clip of await listUnreadClips(ctx.db, ctx.nowMs, BATCH)) {
    await readAgain(ctx, clip).catch(error => ctx.log.warn({ clipId: clip.id, attempts: clip.read_attempts, err: error }, 'clip not read yet'))
  }
}

/** Taken before it is tried: a film that ends the server is not tried for ever. */
async function readAgain(ctx: Ctx, clip: ClipRow): Promise<void> {
  if (clip.read_attempts >= MAX_ATTEMPTS) return refuseUnread(ctx, clip)
  const waitMs = Math.min(CUT_SHORT_AFTER_MS * 2 ** clip.read_attempts, LONGEST_WAIT_MS)
  if (await inTransaction(ctx.db, db => takeReading(db, clip, ctx.nowMs + waitMs))) await readClip(ctx, clip)
}

/** Parts that turn out to be missing are the sender's again; with a store that is down, the next run tries. */
async function giveBack(ctx: Ctx, clip: ClipRow, error: unknown): Promise<void> {
  ctx.log.warn({ clipId: clip.id, err: error }, 'clip not joined yet')
  const isStoreDown = error instanceof Refusal && error.kind === 'unavailable'
  if (!isStoreDown) await inTransaction(ctx.db, db => markCompletionAsked(db, clip.id, null))
}
