import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { startSession } from '#server/features/sessions/start-session'
import { hashSecret, newId } from '#server/ids'
import { write } from '#server/write'
import { insertCoach, listSlugs } from './coach.repository'
import type { InviteTableRow } from './invite.repository'
import { findInvite, markInviteAccepted } from './invite.repository'
import { checkHasNoAccount, stateOf } from './invite.service'
import { hashPassword } from './passwords/password-hash'
import { linkUsedOrExpired } from './people.errors'
import type { SignedIn } from './sign-in.service'
import { freeSlug, slugOf } from './slug'
import type { PresentedToken } from './token.service'
import { mayRepeat } from './token.service'
import { deleteUnconfirmedStudent, findUser, insertUser } from './user.repository'
import { getViewer } from './viewer.service'

export interface AcceptedInvite extends PresentedToken {
  name: string
  password: string
  timeZone: string
  address: string
}

/**
 * Makes the account that an invitation offers and signs in. The letter reached them, so the address needs no other proof.
 * @throws Refusal `link-used-or-expired` (410); `already-has-account` (409) when the address got one meanwhile.
 */
export async function acceptInvite(ctx: Ctx, input: AcceptedInvite): Promise<SignedIn> {
  await ctx.limits.take('link-address', input.address)
  // Asked before hashing too: a dead link is not worth the work.
  await getAcceptableInvite(ctx.db, ctx, input)
  const passwordHash = await hashPassword(input.password)
  const { userId, sessionId } = await write(ctx, async (db) => {
    const row = await getAcceptableInvite(db, ctx, input)
    const userId = row.accepted_by ?? await insertInvited(db, ctx, row, input, passwordHash)
    return { userId, sessionId: await startSession(db, ctx, userId) }
  })
  return { viewer: await getViewer(ctx.db, userId), sessionId }
}

/** An open invitation, or the one that this very request has accepted before. */
async function getAcceptableInvite(db: Database, ctx: Ctx, { token, isRepeated = false }: PresentedToken): Promise<InviteTableRow> {
  const row = await findInvite(db, hashSecret(token))
  if (!row) throw linkUsedOrExpired()
  if (row.accepted_at_ms === null || row.accepted_by === null) {
    if (stateOf(row, ctx.nowMs) !== 'open') throw linkUsedOrExpired()
    return row
  }
  const user = await findUser(db, row.accepted_by)
  if (!mayRepeat(row.accepted_at_ms, ctx.nowMs, isRepeated) || !user || user.suspended_at_ms !== null) throw linkUsedOrExpired()
  return row
}

async function insertInvited(db: Database, ctx: Ctx, invite: InviteTableRow, input: AcceptedInvite, passwordHash: string): Promise<string> {
  await checkHasNoAccount(db, invite.email_key)
  await deleteUnconfirmedStudent(db, invite.email_key)
  const userId = newId(ctx.nowMs)
  await insertUser(db, {
    id: userId,
    email: invite.email,
    email_key: invite.email_key,
    name: input.name,
    role: invite.role,
    time_zone: input.timeZone,
    password_hash: passwordHash,
    email_confirmed_at_ms: ctx.nowMs,
    suspended_at_ms: null,
    picture_key: null,
    created_at_ms: ctx.nowMs,
  })
  if (invite.role === 'coach') {
    await insertCoach(db, { userId, slug: freeSlug(slugOf(input.name), new Set(await listSlugs(db))) })
  }
  await markInviteAccepted(db, invite.id, userId, ctx.nowMs)
  await recordDeed(db, ctx, 'invitation-accepted', invite.id, userId)
  return userId
}
