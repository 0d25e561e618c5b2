import type { H3Event } from 'h3'
import type { App } from '#server/app'
import type { Ctx, ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'
import { newId } from '#server/ids'
import { findSessionId } from './cookie'
import { deleteSession, findSessionViewer, insertSession, touchSession } from './session.repository'

const DAY_MS = 24 * 60 * 60 * 1000
export const SESSION_LASTS_MS = 30 * DAY_MS
/** Often enough for a list of one's sessions to mean something, seldom enough to cost nothing. */
const TOUCH_EVERY_MS = 60 * 60 * 1000

/** Who is signed in, looked up once a request. */
export function findViewer(event: H3Event, app: App, nowMs: number): Promise<ViewerFacts | undefined> {
  event.context.viewer ??= lookUpViewer(event, app, nowMs)
  return event.context.viewer
}

async function lookUpViewer(event: H3Event, app: App, nowMs: number): Promise<ViewerFacts | undefined> {
  const sessionId = await findSessionId(event)
  if (!sessionId) return undefined
  const row = await findSessionViewer(app.db, sessionId, nowMs)
  if (!row) return undefined
  if (nowMs - row.seen_at_ms > TOUCH_EVERY_MS) await touchSession(app.db, sessionId, nowMs)
  return { id: row.user_id, role: row.role, isCoach: row.coach_user_id !== null, sessionId }
}

/** A new session for a person who has just proved who they are. The caller gives the cookie after commit. */
export async function openSession(db: Database, userId: string, nowMs: number): Promise<string> {
  const id = newId(nowMs)
  await insertSession(db, { id, userId, nowMs, expiresAtMs: nowMs + SESSION_LASTS_MS })
  return id
}

/** Opens a session and ends the one that this browser had: whoever could have planted that one must not share the new one. */
export async function startSession(db: Database, ctx: Ctx, userId: string): Promise<string> {
  if (ctx.viewer) await deleteSession(db, ctx.viewer.sessionId)
  return openSession(db, userId, ctx.nowMs)
}
