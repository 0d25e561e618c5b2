import type { Database } from '#server/database/client'

export interface CoachRow {
  id: string
  name: string
  picture_key: string | null
  slug: string
  about: string
  is_open: 0 | 1
}

export async function insertCoach(db: Database, row: { userId: string, slug: string }): Promise<void> {
  await db.insertInto('coaches').values({ user_id: row.userId, slug: row.slug }).execute()
}

export async function listSlugs(db: Database): Promise<string[]> {
  const rows = await db.selectFrom('coaches').select('slug').execute()
  return rows.map(row => row.slug)
}

/** Somebody who answers reviews; undefined for others, and while the account is suspended. */
export async function findCoach(db: Database, id: string): Promise<CoachRow | undefined> {
  return coachRows(db).where('users.id', '=', id).executeTakeFirst()
}

/** The coach's part of what an answer earns, in whole per cent; 0 for people who are no coaches. */
export async function findCoachShare(db: Database, id: string): Promise<number> {
  const row = await db.selectFrom('coaches').select('share_percent').where('user_id', '=', id).executeTakeFirst()
  return row?.share_percent ?? 0
}

/** As `findCoach`, by the name in their address. */
export async function findCoachBySlug(db: Database, slug: string): Promise<CoachRow | undefined> {
  return coachRows(db).where('coaches.slug', '=', slug).executeTakeFirst()
}

/** Everybody who answers reviews, by name. */
export async function listCoaches(db: Database): Promise<CoachRow[]> {
  return coachRows(db).orderBy('users.name').orderBy('users.id').execute()
}

function coachRows(db: Database) {
  return db.selectFrom('coaches')
    .innerJoin('users', 'users.id', 'coaches.user_id')
    .select(['users.id', 'users.name', 'users.picture_key', 'coaches.slug', 'coaches.about', 'coaches.is_open'])
    .where('users.suspended_at_ms', 'is', null)
}
