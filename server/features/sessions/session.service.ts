import type { H3Event } from 'h3'
import type { App } from '#server/app'
import type { ViewerFacts } from '#server/context'
import { findSessionId } from './cookie'
import { findSessionViewer, touchSession } from './session.repository'

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
