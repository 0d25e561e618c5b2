import type { Kysely } from 'kysely'
import { sql } from 'kysely'

/**
 * Runs the statements of one migration in order, inside the migrator's transaction.
 * Statements end with `;` at the end of a line; trigger bodies, which hold such lines, are written on one line.
 */
export async function runStatements(db: Kysely<unknown>, script: string): Promise<void> {
  for (const statement of script.split(/;[ \t]*\n/)) {
    if (statement.trim().length > 0) await sql.raw(statement).execute(db)
  }
}

/** Triggers that make a table one that is only ever added to. */
export function addedToOnly(table: string): string {
  return `
    create trigger ${table}_no_update before update on ${table} begin select raise(abort, '${table} is only added to'); end;
    create trigger ${table}_no_delete before delete on ${table} begin select raise(abort, '${table} is only added to'); end;
  `
}
