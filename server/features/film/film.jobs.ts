import type { Ctx } from '#server/context'
import { listUnreadClips } from '#server/features/reviews/clip.repository'
import { readClip } from './film.service'

/** A reading takes seconds; one that began two minutes ago ended with its server. */
const CUT_SHORT_AFTER_MS = 2 * 60_000
const BATCH = 20

/** Reads clips whose reading was cut short. */
export async function readWaitingClips(ctx: Ctx): Promise<void> {
  for (const clip of await listUnreadClips(ctx.db, ctx.nowMs - CUT_SHORT_AFTER_MS, BATCH)) {
    await readClip(ctx, clip).catch(error => ctx.log.warn({ clipId: clip.id, err: error }, 'clip not read yet'))
  }
}
