import type { Database } from '#server/database/client'

export interface SessionViewerRow {
  user_id: string
  role: 'student' | 'guardian' | 'coach' | 'owner'
  seen_at_ms: number
  coach_user_id: string | null
}

/** The person behind a live session; a suspended one has none. */
function sessionViewerQuery(db: Database, sessionId: string, nowMs: number) {
  return db.selectFrom('sessions')
    .innerJoin('users', 'users.id', 'sessions.user_id')
    .leftJoin('coaches', 'coaches.user_id', 'users.id')
    .select(['sessions.user_id', 'users.role', 'sessions.seen_at_ms', 'coaches.user_id as coach_user_id'])
    .where('sessions.id', '=', sessionId)
    .where('sessions.expires_at_ms', '>', nowMs)
    .where('users.suspended_at_ms', 'is', null)
}

/** Every request asks this, so its SQL is written once. The parameters stand in the order of the query above. */
let compiled: ReturnType<typeof compileSessionViewer> | undefined

function compileSessionViewer(db: Database) {
  return sessionViewerQuery(db, '', 0).compile()
}

export async function findSessionViewer(db: Database, sessionId: string, nowMs: number): Promise<SessionViewerRow | undefined> {
  compiled ??= compileSessionViewer(db)
  const { rows } = await db.executeQuery<SessionViewerRow>({ ...compiled, parameters: [sessionId, nowMs] })
  return rows[0]
}

export async function insertSession(db: Database, row: { id: string, userId: string, nowMs: number, expiresAtMs: number }): Promise<void> {
  await db.insertInto('sessions')
    .values({ id: row.id, user_id: row.userId, created_at_ms: row.nowMs, seen_at_ms: row.nowMs, expires_at_ms: row.expiresAtMs })
    .execute()
}

export async function touchSession(db: Database, sessionId: string, nowMs: number): Promise<void> {
  await db.updateTable('sessions').set({ seen_at_ms: nowMs }).where('id', '=', sessionId).execute()
}

export async function deleteSession(db: Database, sessionId: string): Promise<void> {
  await db.deleteFrom('sessions').where('id', '=', sessionId).execute()
}

/** Ends a person's sessions, all or all but one. */
export async function deleteSessionsOf(db: Database, userId: string, exceptId?: string): Promise<void> {
  await db.deleteFrom('sessions')
    .where('user_id', '=', userId)
    .$if(exceptId !== undefined, query => query.where('id', '<>', exceptId ?? ''))
    .execute()
}

/** @returns how many were deleted. */
export async function deleteExpiredSessions(db: Database, nowMs: number, limit: number): Promise<number> {
  const { numDeletedRows } = await db.deleteFrom('sessions')
    .where('id', 'in', db.selectFrom('sessions').select('id').where('expires_at_ms', '<=', nowMs).limit(limit))
    .executeTakeFirst()
  return Number(numDeletedRows)
}
