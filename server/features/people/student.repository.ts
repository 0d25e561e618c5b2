import type { Insertable } from 'kysely'
import type { Database } from '#server/database/client'
import type { StudentsTable } from '#server/database/schema/people'

export async function insertStudent(db: Database, row: Insertable<StudentsTable>): Promise<void> {
  await db.insertInto('students').values(row).execute()
}
