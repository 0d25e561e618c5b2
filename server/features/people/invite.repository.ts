import type { Insertable, Selectable } from 'kysely'
import type { Database } from '#server/database/client'
import type { InvitesTable } from '#server/database/schema/people'
import type { Cursor } from '#server/features/cursor'

export type InviteTableRow = Selectable<InvitesTable>

export async function insertInvite(db: Database, row: Omit<Insertable<InvitesTable>, 'accepted_at_ms' | 'accepted_by'>): Promise<void> {
  await db.insertInto('invites').values({ ...row, accepted_at_ms: null, accepted_by: null }).execute()
}

export async function findInvite(db: Database, tokenHash: string): Promise<InviteTableRow | undefined> {
  return db.selectFrom('invites').selectAll().where('token_hash', '=', tokenHash).executeTakeFirst()
}

export async function findInviteById(db: Database, id: string): Promise<InviteTableRow | undefined> {
  return db.selectFrom('invites').selectAll().where('id', '=', id).executeTakeFirst()
}

/** Invitations to an address that nobody took: their links stop working. */
export async function deleteOpenInvites(db: Database, emailKey: string): Promise<void> {
  await db.deleteFrom('invites').where('email_key', '=', emailKey).where('accepted_at_ms', 'is', null).execute()
}

export async function markInviteAccepted(db: Database, id: string, userId: string, nowMs: number): Promise<void> {
  await db.updateTable('invites').set({ accepted_at_ms: nowMs, accepted_by: userId }).where('id', '=', id).execute()
}

/** All invitations, newest first, below `after`. */
export async function listInvites(db: Database, after: Cursor | undefined, limit: number): Promise<InviteTableRow[]> {
  return db.selectFrom('invites').selectAll()
    .$if(after !== undefined, query => query.where(({ eb, refTuple, tuple }) =>
      eb(refTuple('created_at_ms', 'id'), '<', tuple(after?.atMs ?? 0, after?.id ?? ''))))
    .orderBy('created_at_ms', 'desc').orderBy('id', 'desc')
    .limit(limit)
    .execute()
}
