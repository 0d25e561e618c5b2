import type { Insertable, Selectable } from 'kysely'
import type { Database } from '#server/database/client'
import type { StudioTable } from '#server/database/schema/people'
import { studioNotSetUp } from './people.errors'

export type StudioRow = Selectable<StudioTable>

/** The one studio of this installation; undefined until it is set up. */
export async function findStudio(db: Database): Promise<StudioRow | undefined> {
  return db.selectFrom('studio').selectAll().where('id', '=', 1).executeTakeFirst()
}

/** @throws Refusal `not-set-up` (503) until the first owner has been made. */
export async function getStudio(db: Database): Promise<StudioRow> {
  const studio = await findStudio(db)
  if (!studio) throw studioNotSetUp()
  return studio
}

export async function insertStudio(db: Database, row: Omit<Insertable<StudioTable>, 'id'>): Promise<void> {
  await db.insertInto('studio').values({ id: 1, ...row }).execute()
}
