import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { hashSecret, newId, newSecret } from '#server/ids'
import { linkUsedOrExpired } from './people.errors'
import type { TokenRow } from './token.repository'
import { findToken, insertToken } from './token.repository'

const MINUTE_MS = 60_000
export const CONFIRM_LASTS_MS = 24 * 60 * MINUTE_MS
export const RESET_LASTS_MS = 30 * MINUTE_MS
/** How long the very same request may be sent again, when its answer was lost on the way. */
const REPEAT_LASTS_MS = 10 * MINUTE_MS

export interface IssuedToken {
  id: string
  /** Goes into the letter and nowhere else. */
  secret: string
  expiresAtMs: number
}

/** A link of 32 random bytes for `userId`, of which only the hash is kept. */
export async function issueToken(
  db: Database, nowMs: number, token: { userId: string, purpose: TokenRow['purpose'], lastsMs: number },
): Promise<IssuedToken> {
  const issued = { id: newId(nowMs), secret: newSecret(), expiresAtMs: nowMs + token.lastsMs }
  await insertToken(db, {
    id: issued.id,
    user_id: token.userId,
    purpose: token.purpose,
    token_hash: hashSecret(issued.secret),
    created_at_ms: nowMs,
    expires_at_ms: issued.expiresAtMs,
  })
  return issued
}

export interface PresentedToken {
  token: string
  /** The same request, key and body, was carried out before: see `isRepeated`. */
  isRepeated?: boolean
}

/**
 * The token behind a link that still works. A repeated request finds its token used by itself; `used_at_ms` tells the caller that all was
 * done but for giving the session.
 * @throws Refusal `link-used-or-expired` (410), for unknown links too.
 */
export async function getUsableToken(
  db: Database, ctx: Pick<Ctx, 'nowMs'>, purpose: TokenRow['purpose'], { token, isRepeated = false }: PresentedToken,
): Promise<TokenRow> {
  const row = await findToken(db, purpose, hashSecret(token))
  if (!row) throw linkUsedOrExpired()
  if (row.used_at_ms === null ? row.expires_at_ms <= ctx.nowMs : !mayRepeat(row.used_at_ms, ctx.nowMs, isRepeated)) throw linkUsedOrExpired()
  return row
}

export function mayRepeat(usedAtMs: number, nowMs: number, isRepeated: boolean): boolean {
  return isRepeated && nowMs - usedAtMs < REPEAT_LASTS_MS
}
