import { join } from 'node:path'
import SQLite from 'better-sqlite3'
import type { World } from './world'

/**
 * Changes a world's database from outside, for what no handler does yet (suspending, more people, more credits).
 * The server reads the change at its next query; WAL lets a second handle write in between.
 */
export function arrange<T>(world: World, work: (database: SQLite.Database) => T): T {
  const database = new SQLite(join(world.dataDir, 'turfnote.sqlite'))
  try {
    database.pragma('busy_timeout = 5000')
    database.pragma('foreign_keys = ON')
    return work(database)
  }
  finally {
    database.close()
  }
}

/** Gives a student of the demo more credits of the first offer. */
export function giveCredits(world: World, email: string, count: number): void {
  arrange(world, (database) => {
    const give = database.prepare(`
      insert into credits (id, student_id, offer_version_id, granted_at_ms)
      select ?, users.id, (select id from offer_versions limit 1), 0 from users where email = ?`)
    for (let index = 0; index < count; index += 1) give.run(`extra-${email}-${index}-${Date.now()}`, email)
  })
}

/** Another account of the same kind as one that is there, with the same password. */
export function copyAccount(world: World, input: { from: string, email: string, name: string }): string {
  const id = crypto.randomUUID()
  arrange(world, (database) => {
    database.prepare(`
      insert into users (id, email, email_key, name, role, time_zone, password_hash, email_confirmed_at_ms, created_at_ms)
      select ?, ?, ?, ?, role, time_zone, password_hash, email_confirmed_at_ms, created_at_ms from users where email = ?`)
      .run(id, input.email, input.email, input.name, input.from)
    database.prepare('insert into coaches (user_id, slug) select ?, ? from users where id = ? and role = \'coach\'').run(id, `copy-${id}`, id)
  })
  return id
}
