import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { newId } from '#server/ids'
import { deleteSession, insertSession } from './session.repository'

const SESSION_LASTS_MS = 30 * 24 * 60 * 60 * 1000

/**
 * A new session for a person who has just proved who they are; the caller gives the cookie after commit. The session that this browser
 * had ends: whoever could have planted that one must not share the new one.
 */
export async function startSession(db: Database, ctx: Ctx, userId: string): Promise<string> {
  if (ctx.viewer) await deleteSession(db, ctx.viewer.sessionId)
  const id = newId(ctx.nowMs)
  await insertSession(db, { id, userId, nowMs: ctx.nowMs, expiresAtMs: ctx.nowMs + SESSION_LASTS_MS })
  return id
}
