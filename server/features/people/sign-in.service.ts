import type { SignIn } from '#shared/schemas/accounts'
import type { Viewer } from '#shared/types/people'
import type { Ctx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import { deleteSession } from '#server/features/sessions/session.repository'
import { startSession } from '#server/features/sessions/start-session'
import { write } from '#server/write'
import { emailKey, limitKey } from './email-key'
import { hashPassword, isWeaker, verifyPassword } from './passwords/password-hash'
import { emailNotConfirmed, wrongEmailOrPassword } from './people.errors'
import { sendConfirmLetter } from './sign-up.service'
import type { UserRow } from './user.repository'
import { findUser, findUserByEmail, updateUser } from './user.repository'
import { getViewer } from './viewer.service'

/** A person who has just proved who they are; the handler gives the session's cookie. */
export interface SignedIn {
  viewer: Viewer
  sessionId: string
}

/**
 * @throws Refusal `wrong-email-or-password` (401); `email-not-confirmed` (403) after the right password, with a new letter on its way;
 * `too-many-tries` (429).
 */
export async function signIn(ctx: Ctx, input: SignIn & { address: string }): Promise<SignedIn> {
  const account = limitKey(ctx, input.email)
  await ctx.limits.take('sign-in-address', input.address)
  await ctx.limits.take('sign-in-account-address', `${account} ${input.address}`)
  const user = await findUserByEmail(ctx.db, emailKey(input.email))
  const isRight = await verifyPassword(input.password, user?.password_hash)
  if (!user?.password_hash || !isRight || user.suspended_at_ms !== null) throw wrongEmailOrPassword()
  if (user.email_confirmed_at_ms === null) return refuseUnconfirmed(ctx, user, account)
  const betterHash = isWeaker(user.password_hash) ? await hashPassword(input.password) : undefined
  const sessionId = await write(ctx, async (db) => {
    // Hashing takes long enough for the password to have been changed, or the account closed, meanwhile.
    const present = await findUser(db, user.id)
    if (present?.password_hash !== user.password_hash || present.suspended_at_ms !== null) throw wrongEmailOrPassword()
    if (betterHash) await updateUser(db, user.id, { password_hash: betterHash })
    await recordDeed(db, ctx, 'signed-in', user.id, user.id)
    return startSession(db, ctx, user.id)
  })
  return { viewer: await getViewer(ctx.db, user.id), sessionId }
}

async function refuseUnconfirmed(ctx: Ctx, user: UserRow, account: string): Promise<never> {
  await ctx.limits.take('mail-account', account)
  // No answer belongs to this write: the request ends as a refusal, and its key stays free for the next try.
  await write({ ...ctx, repeatable: undefined }, db => sendConfirmLetter(db, ctx, user.id))
  throw emailNotConfirmed()
}

/** Ends the session of this browser; a visitor is signed out already. */
export async function signOut(ctx: Ctx): Promise<void> {
  const { viewer } = ctx
  if (!viewer) return
  await write(ctx, async (db) => {
    await deleteSession(db, viewer.sessionId)
    await recordDeed(db, ctx, 'signed-out', viewer.id)
  })
}
