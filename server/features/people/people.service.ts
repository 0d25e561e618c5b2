import type { Page } from '#shared/types/answers'
import type { CoachList, PersonRow } from '#shared/types/people'
import type { Ctx } from '#server/context'
import { decodeCursor, toPage } from '#server/features/cursor'
import { listCoaches } from './coach.repository'
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
  return {
    items: rows.map(row => ({
      id: row.id,
      name: row.name,
      hasPicture: row.picture_key !== null,
      slug: row.slug,
      isOpen: row.is_open === 1,
      about: row.about,
    })),
  }
}
