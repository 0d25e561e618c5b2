import type { Viewer } from '#shared/types/people'
import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { findViewerRow } from './user.repository'

/** @throws when there is no such person: the caller has just found them. */
export async function getViewer(db: Database, userId: string): Promise<Viewer> {
  const row = await findViewerRow(db, userId)
  if (!row) throw new Error(`There is no user ${userId}.`)
  return {
    id: row.id,
    name: row.name,
    email: row.email,
    role: row.role,
    isCoach: row.coach_user_id !== null,
    timeZone: row.time_zone,
    hasPicture: row.picture_key !== null,
    // A guardian's own are none: credits stand with the student who will use them.
    creditsLeft: row.credits_left,
  }
}

/** Who is signed in; null for a visitor. */
export async function findOwnViewer(ctx: Ctx): Promise<Viewer | null> {
  return ctx.viewer ? getViewer(ctx.db, ctx.viewer.id) : null
}
