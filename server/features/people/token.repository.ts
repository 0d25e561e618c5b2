import type { Insertable, Selectable } from 'kysely'
import type { Database } from '#server/database/client'
import type { TokensTable } from '#server/database/schema/people'

export type TokenRow = Selectable<TokensTable>

export async function insertToken(db: Database, row: Omit<Insertable<TokensTable>, 'used_at_ms'>): Promise<void> {
  await db.insertInto('tokens').values({ ...row, used_at_ms: null }).execute()
}

export async function findToken(db: Database, purpose: TokenRow['purpose'], tokenHash: string): Promise<TokenRow | undefined> {
  return db.selectFrom('tokens').selectAll().where('token_hash', '=', tokenHash).where('purpose', '=', purpose).executeTakeFirst()
}

export async function findTokenById(db: Database, id: string): Promise<TokenRow | undefined> {
  return db.selectFrom('tokens').selectAll().where('id', '=', id).executeTakeFirst()
}

export async function markTokenUsed(db: Database, id: string, nowMs: number): Promise<void> {
  await db.updateTable('tokens').set({ used_at_ms: nowMs }).where('id', '=', id).execute()
}

/** A person's links of one purpose that were not used: once one was, or the password is another, the rest must not work. */
export async function deleteUnusedTokens(db: Database, userId: string, purpose: TokenRow['purpose']): Promise<void> {
  await db.deleteFrom('tokens')
    .where('user_id', '=', userId).where('purpose', '=', purpose).where('used_at_ms', 'is', null)
    .execute()
}

/** @returns how many were deleted. */
export async function deleteExpiredTokens(db: Database, nowMs: number, limit: number): Promise<number> {
  const { numDeletedRows } = await db.deleteFrom('tokens')
    .where('id', 'in', db.selectFrom('tokens').select('id').where('expires_at_ms', '<=', nowMs).limit(limit))
    .executeTakeFirst()
  return Number(numDeletedRows)
}
