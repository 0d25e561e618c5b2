import type { Page } from '#shared/types/answers'
import type { CoachBrief, CoachList, PersonRow } from '#shared/types/people'
import type { Ctx } from '#server/context'
import { decodeCursor, toPage } from '#server/features/cursor'
import { notFound } from '#server/refusal'
import type { CoachRow } from './coach.repository'
import { findCoachBySlug, listCoaches } from './coach.repository'
import { listUsers } from './user.repository'

/** Everybody with an account, newest first. */
export async function listPeople(ctx: Ctx, { cursor, limit }: { cursor?: string | undefined, limit: number }): Promise<Page<PersonRow>> {
  const rows = await listUsers(ctx.db, cursor === undefined ? undefined : decodeCursor(cursor), limit + 1)
  return toPage(rows, limit, row => ({
    id: row.id,
    name: row.name,
    hasPicture: row.picture_key !== null,
    email: row.email,
    role: row.role,
    isSuspended: row.suspended_at_ms !== null,
    createdAtMs: row.created_at_ms,
  }), row => ({ atMs: row.created_at_ms, id: row.id }))
}

/** The studio's coaches, by name; a suspended one is not shown. */
export async function listStudioCoaches(ctx: Ctx): Promise<CoachList> {
  const rows = await listCoaches(ctx.db)
  return { items: rows.map(viewCoach) }
}

/** One coach, by the name in their address, also while they take no reviews. @throws Refusal `not-found`. */
export async function readCoach(ctx: Ctx, { slug }: { slug: string }): Promise<CoachBrief> {
  const row = await findCoachBySlug(ctx.db, slug)
  if (!row) throw notFound('coach')
  return viewCoach(row)
}

function viewCoach(row: CoachRow): CoachBrief {
  return {
    id: row.id,
    name: row.name,
    hasPicture: row.picture_key !== null,
    slug: row.slug,
    isOpen: row.is_open === 1,
    about: row.about,
  }
}
