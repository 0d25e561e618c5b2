import type { LedgerLine } from '#shared/domain/money/ledger'
import { isBalanced } from '#shared/domain/money/ledger'
import type { Database } from '#server/database/client'
import type { LedgerEntriesTable } from '#server/database/schema/money'
import { newId } from '#server/ids'

export interface Movement extends Pick<LedgerEntriesTable, 'reason' | 'currency' | 'order_id' | 'review_id' | 'coach_id' | 'at_ms'> {
  /** Names the movement, so that telling it twice writes it once. */
  id: string
  lines: LedgerLine[]
}

/** Writes a movement, once. @throws when its lines do not balance: a fault of ours. */
export async function insertMovement(db: Database, { id, lines, ...rest }: Movement): Promise<void> {
  if (!isBalanced(lines)) throw new Error(`Movement ${id} does not balance.`)
  for (const { account, amountMinor } of lines) {
    await db.insertInto('ledger_entries')
      .values({ ...rest, id: newId(rest.at_ms), movement_id: id, account, amount_minor: amountMinor })
      .onConflict(conflict => conflict.columns(['movement_id', 'account']).doNothing())
      .execute()
  }
}
