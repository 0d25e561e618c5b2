import SQLite from 'better-sqlite3'
import type { Dialect, DialectAdapter } from 'kysely'
import { Kysely, SqliteAdapter, SqliteDialect } from 'kysely'
import type { Tables } from './schema'
import { outerHandleGuard } from './transaction'

/** The one way to the data. A transaction is a `Database` too, so repositories take either. */
export type Database = Kysely<Tables>

/** Kysely believes that SQLite cannot roll back DDL; it can, and without this a failed migration stays half done. */
class TransactionalDdlAdapter extends SqliteAdapter implements DialectAdapter {
  override get supportsTransactionalDdl(): boolean {
    return true
  }
}

class TurfnoteDialect extends SqliteDialect implements Dialect {
  override createAdapter(): DialectAdapter {
    return new TransactionalDdlAdapter()
  }
}

export interface OpenDatabase {
  db: Database
  /** Grows with every statement that may change something; the same number means that nothing was written in between by this process. */
  writeCount(): number
  /** Closes the one file handle; the database cannot be used afterwards. */
  close(): Promise<void>
}

/**
 * Opens the one handle on the file at `path` (made when missing; `:memory:` for none).
 * `synchronous = FULL` because with `NORMAL` acknowledged commits were lost in simulated power cuts.
 */
export function openDatabase(path: string): OpenDatabase {
  const handle = new SQLite(path)
  handle.pragma('journal_mode = WAL')
  handle.pragma('synchronous = FULL')
  handle.pragma('foreign_keys = ON')
  handle.pragma('secure_delete = ON')
  handle.pragma('busy_timeout = 5000')
  // Copying the log back four times less often than by default: 16 MB of it, read back in well under a second at a start.
  handle.pragma('wal_autocheckpoint = 4000')
  const database = withPreparedOnce(handle)
  const db = new Kysely<Tables>({ dialect: new TurfnoteDialect({ database }), plugins: [outerHandleGuard] })
  return { db, writeCount: database.writeCount, close: () => db.destroy() }
}

/** More different statements than the product has; a bound, so that generated SQL cannot fill the memory. */
const MAX_PREPARED = 500

/** Preparing costs about as much as running a short query, and the product's queries are few: keep them prepared. */
function withPreparedOnce(handle: SQLite.Database) {
  const prepared = new Map<string, SQLite.Statement>()
  let writes = 0

  function statementOf(sql: string): SQLite.Statement {
    const known = prepared.get(sql)
    if (known && !known.busy) return known
    const statement = handle.prepare(sql)
    if (prepared.size < MAX_PREPARED) prepared.set(sql, statement)
    return statement
  }

  return {
    writeCount: () => writes,
    // Kysely asks for a statement right before running it, so this is the place to count.
    prepare(sql: string) {
      const statement = statementOf(sql)
      if (!statement.readonly) writes += 1
      return statement
    },
    close() {
      prepared.clear()
      handle.close()
    },
  }
}
