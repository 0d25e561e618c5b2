import type { Migration } from 'kysely'
import { Migrator, sql } from 'kysely'
import type { Database } from './client'
import { migrations as shippedMigrations } from './migrations'

/** The file holds migrations that this program does not know: it was written by a newer version. */
export class NewerDatabase extends Error {
  override name = 'NewerDatabase'
  constructor(unknown: string[]) {
    super(`This database was made by a newer version of Turfnote (it has ${unknown.join(', ')}). Start that version, or restore a backup made before it.`)
  }
}

/** A migration failed; it was rolled back whole and the database is as before. */
export class MigrationFailed extends Error {
  override name = 'MigrationFailed'
}

/**
 * Brings the database up to this program's version, each migration in a transaction of its own.
 * @returns how many migrations ran just now.
 */
export async function migrate(db: Database, migrations: Record<string, Migration> = shippedMigrations): Promise<number> {
  const unknown = (await doneMigrations(db)).filter(name => !(name in migrations))
  if (unknown.length > 0) throw new NewerDatabase(unknown)
  const migrator = new Migrator({ db: db.withoutPlugins(), provider: { getMigrations: async () => migrations } })
  const { error, results } = await migrator.migrateToLatest()
  if (error) {
    const failed = results?.find(result => result.status === 'Error')?.migrationName
    throw new MigrationFailed(`Migration ${failed ?? 'unknown'} failed and was undone: ${error instanceof Error ? error.message : String(error)}`, { cause: error })
  }
  return results?.length ?? 0
}

/** Names of the migrations that the file has, in order; none in an empty file. */
export async function doneMigrations(db: Database): Promise<string[]> {
  const table = await sql<{ name: string }>`select name from sqlite_master where type = 'table' and name = 'kysely_migration'`.execute(db)
  if (table.rows.length === 0) return []
  const done = await sql<{ name: string }>`select name from kysely_migration order by name`.execute(db)
  return done.rows.map(row => row.name)
}
