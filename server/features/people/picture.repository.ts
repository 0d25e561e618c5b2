import type { ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'

/**
 * The picture of a person whom `viewer` may see: themselves, anybody for coaches and owners, coaches and owners for anybody,
 * and junior and guardian each other. Undefined for everybody else, and for who has no picture.
 */
export async function findVisiblePictureKey(db: Database, viewer: ViewerFacts, personId: string): Promise<string | undefined> {
  const seesEverybody = viewer.isCoach || viewer.role === 'coach' || viewer.role === 'owner' || viewer.id === personId
  const row = await db.selectFrom('users')
    .select('picture_key')
    .where('id', '=', personId)
    .$if(!seesEverybody, query => query.where(({ eb, exists, or, selectFrom }) => or([
      eb('role', 'in', ['coach', 'owner']),
      exists(selectFrom('guardianships').select('junior_id')
        .where('ended_at_ms', 'is', null)
        .where(({ and, or, eb }) => or([
          and([eb('guardian_id', '=', viewer.id), eb('junior_id', '=', personId)]),
          and([eb('guardian_id', '=', personId), eb('junior_id', '=', viewer.id)]),
        ]))),
    ])))
    .executeTakeFirst()
  return row?.picture_key ?? undefined
}
