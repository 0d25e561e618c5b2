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
