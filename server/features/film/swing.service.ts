import type { FieldErrors } from '#shared/types/answers'
import type { ClipBrief } from '#shared/types/reviews'
import type { SwingInput } from '#shared/schemas/swings'
import type { SignedInCtx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import { viewClipWithSwings } from '#server/features/reviews/review.view'
import { invalidFields } from '#server/refusal'
import { write } from '#server/write'
import { alreadySent, clipNotRead } from './film.errors'
import { replaceSwings } from './swing.repository'
import { getOwnClip } from './upload.service'

/**
 * Says where a clip's swings lie and what each ball did, in place of what was said before.
 * @throws Refusal `clip-not-ready`, `wrong-moment` (409), `invalid-fields` (422) for a swing that lies outside the clip.
 */
export async function changeSwings(ctx: SignedInCtx, { id, swings }: { id: string, swings: SwingInput[] }): Promise<ClipBrief> {
  return write(ctx, async (db) => {
    const clip = await getOwnClip(ctx, id, db)
    if (clip.review_state !== 'draft' && clip.review_state !== 'new_film') throw alreadySent()
    if (clip.state !== 'accepted' || clip.duration_ms === null) throw clipNotRead()
    checkInside(swings, clip.duration_ms)
    await replaceSwings(db, id, swings.map((swing, index) => ({
      number: index + 1,
      from_ms: swing.fromMs,
      to_ms: swing.toMs,
      contact: swing.contact,
      flight_start: swing.flight?.start ?? null,
      flight_curve: swing.flight?.curve ?? null,
      flight_height: swing.flight?.height ?? null,
      carry_m: swing.carryM,
      surface: swing.surface,
    })), ctx.nowMs)
    await recordDeed(db, ctx, 'swings-told', id)
    return viewClipWithSwings(db, clip)
  })
}

function checkInside(swings: SwingInput[], durationMs: number): void {
  const fields: FieldErrors = {}
  swings.forEach(({ toMs }, index) => {
    if (toMs > durationMs) fields[`swings.${index}.toMs`] = `The clip ends at ${durationMs} ms.`
  })
  if (Object.keys(fields).length > 0) throw invalidFields(fields)
}
