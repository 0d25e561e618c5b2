import type { Ctx } from './context'
import type { Database } from './database/client'
import { inTransaction } from './database/transaction'

/** A POST that names itself by a key, so that it can be sent again without harm. */
export interface RepeatableRequest {
  /** Who and what: another person's key, or the same key on another address, is another request. */
  scope: string
  key: string
  requestHash: string
}

/** This very request was carried out already; its stored answer is to be given again. */
export class AlreadyDone extends Error {
  override name = 'AlreadyDone'
}

/**
 * One transaction that also claims the request's idempotency key and stores the answer: either both happened or neither,
 * and it costs one wait for the disk. `work` returns what the API answers.
 *
 * @throws AlreadyDone when the same key was committed meanwhile; nothing of `work` remains.
 */
export async function write<T>(ctx: Ctx, work: (db: Database) => Promise<T>): Promise<T> {
  const answer = await inTransaction(ctx.db, async (db) => {
    const { repeatable } = ctx
    // Asked first, since the work of a second one would find a moment that is no longer right.
    if (repeatable && await findDone(db, repeatable)) throw new AlreadyDone()
    const result = await work(db)
    if (repeatable) await insertDone(db, repeatable, JSON.stringify(result ?? null), ctx.nowMs)
    return result
  })
  pokeJobs(ctx)
  return answer
}

/** Key and answer in one row, in the commit of the change itself. */
async function insertDone(db: Database, { scope, key, requestHash }: RepeatableRequest, answer: string, nowMs: number): Promise<void> {
  const done = await db.insertInto('idempotency_keys')
    .values({ scope, key, request_hash: requestHash, answer, created_at_ms: nowMs })
    .onConflict(conflict => conflict.doNothing())
    .executeTakeFirst()
  if (done.numInsertedOrUpdatedRows === 0n) throw new AlreadyDone()
}

/** Wakes the jobs that a committed change asked for. */
export function pokeJobs(ctx: Ctx): void {
  ctx.pokesAfterWrite.forEach(job => ctx.poke(job))
  ctx.pokesAfterWrite.clear()
}

export async function findDone(db: Database, request: RepeatableRequest): Promise<{ request_hash: string, answer: string } | undefined> {
  return db.selectFrom('idempotency_keys')
    .select(['request_hash', 'answer'])
    .where('scope', '=', request.scope).where('key', '=', request.key)
    .executeTakeFirst()
}
