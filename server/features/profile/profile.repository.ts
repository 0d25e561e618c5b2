import type { Insertable, Selectable, Updateable } from 'kysely'
import type { Database } from '#server/database/client'
import type { ClubsTable, StudentsTable } from '#server/database/schema/people'

export type StudentRow = Selectable<StudentsTable>
export type ClubRow = Selectable<ClubsTable>

export async function findStudent(db: Database, userId: string): Promise<StudentRow | undefined> {
  return db.selectFrom('students').selectAll().where('user_id', '=', userId).executeTakeFirst()
}

export async function updateStudent(db: Database, userId: string, change: Updateable<StudentsTable>): Promise<void> {
  await db.updateTable('students').set(change).where('user_id', '=', userId).execute()
}

/** In the student's own order. */
export async function listClubs(db: Database, studentId: string): Promise<ClubRow[]> {
  return db.selectFrom('clubs').selectAll().where('student_id', '=', studentId).orderBy('position').execute()
}

export async function replaceClubs(db: Database, studentId: string, rows: Insertable<ClubsTable>[]): Promise<void> {
  await db.deleteFrom('clubs').where('student_id', '=', studentId).execute()
  if (rows.length > 0) await db.insertInto('clubs').values(rows).execute()
}
