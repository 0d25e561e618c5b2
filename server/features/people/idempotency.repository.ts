import { sql } from 'kysely'
import type { Database } from '#server/database/client'

/** Deletes keys of requests made before `beforeMs`. @returns how many. */
export async function deleteOldKeys(db: Database, beforeMs: number, limit: number): Promise<number> {
  const rowId = sql<number>`rowid`
  const { numDeletedRows } = await db.deleteFrom('idempotency_keys')
    .where(rowId, 'in', db.selectFrom('idempotency_keys').select(rowId.as('row')).where('created_at_ms', '<', beforeMs).limit(limit))
    .executeTakeFirst()
  return Number(numDeletedRows)
}
