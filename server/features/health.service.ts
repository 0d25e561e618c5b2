import { sql } from 'kysely'
import type { HealthAnswer } from '#shared/types/answers'
import type { Ctx } from '#server/context'
import { doneMigrations } from '#server/database/migrate'
import { migrations } from '#server/database/migrations'
import { version } from '#server/version'

/** Whether the database answers and is at this program's version. */
export async function readHealth(ctx: Ctx): Promise<HealthAnswer> {
  const known = Object.keys(migrations).length
  try {
    await sql`select 1 from sqlite_master limit 1`.execute(ctx.db)
    const done = (await doneMigrations(ctx.db)).length
    return { status: done === known ? 'ok' : 'failing', version, database: 'ok', migrations: { done, known } }
  }
  catch (error) {
    ctx.log.error({ err: error }, 'database not usable')
    return { status: 'failing', version, database: 'failing', migrations: { done: 0, known } }
  }
}
