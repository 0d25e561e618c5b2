import type { Ctx } from '#server/context'
import { giveUpStrayUploads, takeBackAbandoned } from './abandoned'
import { markClipLost, removeLostPhoto } from './lost-film'
import type { ObjectKind } from './match-objects'
import { matchObjects } from './match-objects'
import { findClipsNaming, findPhotosNaming, listClipsNeeding, listPhotosNeeding } from './sweep.repository'

const DAY_MS = 24 * 60 * 60_000

const CLIPS: ObjectKind = { prefix: 'film/', findNaming: findClipsNaming, listNeeding: listClipsNeeding, lose: markClipLost }
const PHOTOS: ObjectKind = { prefix: 'photos/', findNaming: findPhotosNaming, listNeeding: listPhotosNeeding, lose: removeLostPhoto }

/**
 * Leaves no object without a row and no row without an object, whatever broke off where: what is a day old and belongs to nothing goes. Each
 * step stands by itself, so that one that fails does not keep the others; all may run twice, and beside people who send.
 */
export async function sweepFilm(ctx: Ctx): Promise<void> {
  const beforeMs = ctx.nowMs - DAY_MS
  const steps = {
    abandoned: () => takeBackAbandoned(ctx, beforeMs),
    uploads: () => giveUpStrayUploads(ctx, CLIPS.prefix, beforeMs),
    clips: () => matchObjects(ctx, CLIPS, beforeMs),
    photos: () => matchObjects(ctx, PHOTOS, beforeMs),
  }
  for (const [step, run] of Object.entries(steps)) {
    await run().catch(error => ctx.log.error({ step, err: error }, 'film sweep broke off'))
  }
}
