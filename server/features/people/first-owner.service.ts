import type { Database } from '#server/database/client'
import { inTransaction } from '#server/database/transaction'
import { newId } from '#server/ids'
import { emailKey } from './email-key'
import { findStudio, insertStudio } from './studio.repository'
import { issueToken } from './token.service'
import { findUserByEmail, hasOwner, insertUser } from './user.repository'

/** Longer than a link that anybody can ask for: it is handed over by whoever runs the machine. */
const FIRST_LINK_LASTS_MS = 24 * 60 * 60 * 1000

/** There is an owner already, who can invite others. */
export class OwnerExists extends Error {
  override name = 'OwnerExists'
  constructor() {
    super('This studio has an owner. Owners invite others on the page "People"; a forgotten password is replaced on the sign-in page.')
  }
}

/** The address belongs to an account that is not an owner's. */
export class AddressTaken extends Error {
  override name = 'AddressTaken'
  constructor() {
    super('This address has an account already, and not an owner\'s. Give another address.')
  }
}

export interface FirstOwner {
  email: string
  name: string
  studio: {
    name: string
    /** IANA name. */
    timeZone: string
    /** ISO 4217, three letters. */
    currency: string
  }
}

/**
 * The studio, when it is not set up yet, and its first owner, who has no password until the link is opened.
 * @returns the secret of the link, which works once.
 * @throws OwnerExists, AddressTaken; nothing is changed then.
 */
export async function makeFirstOwner(database: Database, input: FirstOwner, nowMs: number): Promise<{ secret: string, expiresAtMs: number }> {
  return inTransaction(database, async (db) => {
    if (await hasOwner(db)) throw new OwnerExists()
    if (await findUserByEmail(db, emailKey(input.email))) throw new AddressTaken()
    const studio = await findStudio(db)
    if (!studio) {
      await insertStudio(db, {
        name: input.studio.name, time_zone: input.studio.timeZone, currency: input.studio.currency, contact_email: input.email,
      })
    }
    const userId = newId(nowMs)
    await insertUser(db, {
      id: userId,
      email: input.email,
      email_key: emailKey(input.email),
      name: input.name,
      role: 'owner',
      time_zone: studio?.time_zone ?? input.studio.timeZone,
      password_hash: null,
      // Whoever runs the machine vouches for the address; unconfirmed, it could be signed up for by others.
      email_confirmed_at_ms: nowMs,
      suspended_at_ms: null,
      picture_key: null,
      created_at_ms: nowMs,
    })
    return issueToken(db, nowMs, { userId, purpose: 'reset', lastsMs: FIRST_LINK_LASTS_MS })
  })
}
