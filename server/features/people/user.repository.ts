import type { Insertable, Selectable, Updateable } from 'kysely'
import type { Role } from '#shared/types/people'
import type { Database } from '#server/database/client'
import type { UsersTable } from '#server/database/schema/people'
import type { Cursor } from '#server/features/cursor'

export type UserRow = Selectable<UsersTable>

export async function findUser(db: Database, id: string): Promise<UserRow | undefined> {
  return db.selectFrom('users').selectAll().where('id', '=', id).executeTakeFirst()
}

export async function findUserByEmail(db: Database, emailKey: string): Promise<UserRow | undefined> {
  return db.selectFrom('users').selectAll().where('email_key', '=', emailKey).executeTakeFirst()
}

export async function insertUser(db: Database, row: Insertable<UsersTable>): Promise<void> {
  await db.insertInto('users').values(row).execute()
}

export async function updateUser(db: Database, id: string, change: Updateable<UsersTable>): Promise<void> {
  await db.updateTable('users').set(change).where('id', '=', id).execute()
}

/** The address was proved by a link; the first proof counts. */
export async function markEmailConfirmed(db: Database, id: string, nowMs: number): Promise<void> {
  await db.updateTable('users').set({ email_confirmed_at_ms: nowMs })
    .where('id', '=', id).where('email_confirmed_at_ms', 'is', null).execute()
}

/** A sign-up that nobody has confirmed is nobody's account: it must not keep the address from whoever can. */
export async function deleteUnconfirmedStudent(db: Database, emailKey: string): Promise<void> {
  await db.deleteFrom('users')
    .where('email_key', '=', emailKey).where('email_confirmed_at_ms', 'is', null).where('role', '=', 'student')
    .execute()
}

export async function hasOwner(db: Database): Promise<boolean> {
  const owner = await db.selectFrom('users').select('id').where('role', '=', 'owner').limit(1).executeTakeFirst()
  return owner !== undefined
}

export interface ViewerRow {
  id: string
  name: string
  email: string
  role: Role
  time_zone: string
  picture_key: string | null
  coach_user_id: string | null
  credits_left: number
}

/** A person with what `Viewer` tells of them, in one query: every page asks for it. */
export async function findViewerRow(db: Database, id: string): Promise<ViewerRow | undefined> {
  const row = await db.selectFrom('users')
    .leftJoin('coaches', 'coaches.user_id', 'users.id')
    .select(['users.id', 'users.name', 'users.email', 'users.role', 'users.time_zone', 'users.picture_key', 'coaches.user_id as coach_user_id'])
    .select(eb => eb.selectFrom('credits')
      .select(({ fn }) => fn.countAll<number>().as('count'))
      .whereRef('credits.student_id', '=', 'users.id').where('credits.spent_at_ms', 'is', null)
      .as('credits_left'))
    .where('users.id', '=', id)
    .executeTakeFirst()
  // Counting always gives a row; only the types cannot know.
  return row && { ...row, credits_left: row.credits_left ?? 0 }
}

/** Everybody, newest first, below `after`. */
export async function listUsers(db: Database, after: Cursor | undefined, limit: number): Promise<UserRow[]> {
  return db.selectFrom('users').selectAll()
    .$if(after !== undefined, query => query.where(({ eb, refTuple, tuple }) =>
      eb(refTuple('created_at_ms', 'id'), '<', tuple(after?.atMs ?? 0, after?.id ?? ''))))
    .orderBy('created_at_ms', 'desc').orderBy('id', 'desc')
    .limit(limit)
    .execute()
}
