import type { z } from 'zod'
import type { queueQuery } from '#shared/schemas/reviews'
import type { SignedInCtx } from '#server/context'
import { readQueue } from './queue.service'

interface KeptPage {
  json: string
  writeCount: number
  nowMs: number
}

const KEPT_FOR_MS = 1000
const MAX_KEPT = 500
const kept = new Map<string, KeptPage>()

/**
 * The queue page as JSON, written once for as long as it would come out the same.
 *
 * Every desk asks for its page twice a minute and after every move, and drawing the lines of 25 promises costs far more than telling them.
 * Keeping a page is safe: it is kept for one viewer and one query; a single write by this process, which alone writes, ends every kept page at
 * once, so a move is seen by the next request; and after a second it ends anyway, so its `nowMs` and time in hand are at most a second old.
 * Who asks, and whether they still may, is looked up before this at every request.
 */
export async function readKeptQueue(ctx: SignedInCtx, query: z.output<typeof queueQuery>): Promise<string> {
  const key = `${ctx.viewer.id} ${ctx.viewer.role} ${ctx.viewer.isCoach} ${query.limit} ${query.cursor ?? ''}`
  const writeCount = ctx.writeCount()
  const known = kept.get(key)
  const ageMs = known ? ctx.nowMs - known.nowMs : Number.POSITIVE_INFINITY
  if (known?.writeCount === writeCount && ageMs >= 0 && ageMs < KEPT_FOR_MS) return known.json
  const json = JSON.stringify(await readQueue(ctx, query))
  if (kept.size >= MAX_KEPT) kept.clear()
  kept.set(key, { json, writeCount, nowMs: ctx.nowMs })
  return json
}
