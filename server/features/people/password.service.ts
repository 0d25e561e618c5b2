import type { Done } from '#shared/types/answers'
import type { Ctx, SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { queueLetter } from '#server/features/mail/outbox.service'
import { deleteSessionsOf } from '#server/features/sessions/session.repository'
import { startSession } from '#server/features/sessions/start-session'
import type { Refusal } from '#server/refusal'
import { invalidFields } from '#server/refusal'
import { write } from '#server/write'
import { emailKey, limitKey } from './email-key'
import { hashPassword, verifyPassword } from './passwords/password-hash'
import { linkUsedOrExpired } from './people.errors'
import { takingAtLeast } from './same-time'
import type { SignedIn } from './sign-in.service'
import { deleteUnusedTokens, markTokenUsed } from './token.repository'
import type { PresentedToken } from './token.service'
import { RESET_LASTS_MS, getUsableToken, issueToken } from './token.service'
import type { UserRow } from './user.repository'
import { findUser, findUserByEmail, markEmailConfirmed, updateUser } from './user.repository'
import { getViewer } from './viewer.service'

/** Well above what queueing a letter takes, below what a person minds. */
const FORGOT_TAKES_MS = 400

/**
 * Sends the link for a new password to whoever holds the account. Answers the same, and as late, when there is none: writing the letter
 * waits for the disk, and that could be told by a watch.
 */
export async function askForReset(ctx: Ctx, input: { email: string, address: string }): Promise<Done> {
  await ctx.limits.take('forgot-address', input.address)
  await ctx.limits.take('mail-account', limitKey(ctx, input.email))
  return takingAtLeast(FORGOT_TAKES_MS, () => write(ctx, async (db): Promise<Done> => {
    const user = await findUserByEmail(db, emailKey(input.email))
    if (user && user.suspended_at_ms === null) await sendResetLetter(db, ctx, user.id)
    return { ok: true }
  }))
}

async function sendResetLetter(db: Database, ctx: Ctx, userId: string): Promise<void> {
  const token = await issueToken(db, ctx.nowMs, { userId, purpose: 'reset', lastsMs: RESET_LASTS_MS })
  await queueLetter(db, ctx, {
    letter: 'forgotten-password',
    event: token.id,
    subjectId: token.id,
    to: { userId },
    secret: token.secret,
    expiresAtMs: token.expiresAtMs,
  })
}

/**
 * A new password by the link of the letter. Every session ends, since one of them may be a stranger's, and this browser gets a new one.
 * @throws Refusal `link-used-or-expired` (410).
 */
export async function resetPassword(ctx: Ctx, input: PresentedToken & { password: string, address: string }): Promise<SignedIn> {
  await ctx.limits.take('link-address', input.address)
  // Asked before hashing too: a dead link is not worth the work.
  await getUsableToken(ctx.db, ctx, 'reset', input)
  const passwordHash = await hashPassword(input.password)
  const { userId, sessionId } = await write(ctx, async (db) => {
    const token = await getUsableToken(db, ctx, 'reset', input)
    const user = await findUser(db, token.user_id)
    if (!user || user.suspended_at_ms !== null) throw linkUsedOrExpired()
    if (token.used_at_ms === null) {
      await markTokenUsed(db, token.id, ctx.nowMs)
      // The letter reached them, so the address is theirs as well.
      await markEmailConfirmed(db, user.id, ctx.nowMs)
      await setPassword(db, ctx, user, passwordHash)
      await deleteSessionsOf(db, user.id)
      await recordDeed(db, ctx, 'password-reset', user.id, user.id)
    }
    return { userId: user.id, sessionId: await startSession(db, ctx, user.id) }
  })
  return { viewer: await getViewer(ctx.db, userId), sessionId }
}

/**
 * Another password, by someone who knows the present one. All their other sessions end.
 * @throws Refusal `invalid-fields` (422, field `current`) when the present one is wrong; `too-many-tries` (429).
 */
export async function changePassword(ctx: SignedInCtx, input: { current: string, next: string }): Promise<Done> {
  const { viewer } = ctx
  await ctx.limits.take('password-account', viewer.id)
  const before = await findUser(ctx.db, viewer.id)
  if (!await verifyPassword(input.current, before?.password_hash)) throw wrongPresentPassword()
  const passwordHash = await hashPassword(input.next)
  return write(ctx, async (db): Promise<Done> => {
    const present = await findUser(db, viewer.id)
    // Hashing takes long enough for the password to have been changed elsewhere meanwhile.
    if (!present || present.password_hash !== before?.password_hash) throw wrongPresentPassword()
    await setPassword(db, ctx, present, passwordHash)
    await deleteSessionsOf(db, viewer.id, viewer.sessionId)
    await recordDeed(db, ctx, 'password-changed', viewer.id)
    return { ok: true }
  })
}

function wrongPresentPassword(): Refusal {
  return invalidFields({ current: 'This is not your present password.' })
}

async function setPassword(db: Database, ctx: Ctx, user: UserRow, passwordHash: string): Promise<void> {
  await updateUser(db, user.id, { password_hash: passwordHash })
  await deleteUnusedTokens(db, user.id, 'reset')
  // The first password of an owner made by command changes nothing that anybody had.
  if (user.password_hash === null) return
  await queueLetter(db, ctx, { letter: 'password-changed', event: ctx.requestId, subjectId: user.id, to: { userId: user.id } })
}
