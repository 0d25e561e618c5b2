import { sql } from 'kysely'
import type { Database } from '#server/database/client'

/**
 * Deletes keys of requests made before `beforeMs`, the oldest first. Rows are only ever added at the end, so the oldest stand first in the table and no
 * index of times is needed.
 * @returns how many.
 */
export async function deleteOldKeys(db: Database, beforeMs: number, limit: number): Promise<number> {
  const rowId = sql<number>`rowid`
  const { numDeletedRows } = await db.deleteFrom('idempotency_keys')
    .where(rowId, 'in', db.selectFrom('idempotency_keys').select(rowId.as('row')).orderBy(rowId).limit(limit))
    .where('created_at_ms', '<', beforeMs)
    .executeTakeFirst()
  return Number(numDeletedRows)
}
