import type { Ctx } from '#server/context'
import { deleteExpiredSessions } from '#server/features/sessions/session.repository'
import { deleteOldKeys } from './idempotency.repository'
import { deleteExpiredTokens } from './token.repository'

const KEYS_LAST_MS = 30 * 24 * 60 * 60 * 1000
/** Small, since everybody else waits while one batch is deleted. */
const BATCH = 500
/** What is left then is left for the next minute. */
const MAX_BATCHES = 20

/** Clears what has run out: sessions, links of letters, and the keys of requests that nobody sends again. */
export async function tidyPeople(ctx: Ctx): Promise<void> {
  await inBatches(limit => deleteExpiredSessions(ctx.db, ctx.nowMs, limit))
  await inBatches(limit => deleteExpiredTokens(ctx.db, ctx.nowMs, limit))
  await inBatches(limit => deleteOldKeys(ctx.db, ctx.nowMs - KEYS_LAST_MS, limit))
}

async function inBatches(deleteSome: (limit: number) => Promise<number>): Promise<void> {
  for (let batch = 0; batch < MAX_BATCHES; batch++) {
    if (await deleteSome(BATCH) < BATCH) return
  }
}
