import { ageInYears } from '#shared/domain/people/age'
import type { SignUp } from '#shared/schemas/accounts'
import type { Done } from '#shared/types/answers'
import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { queueLetter } from '#server/features/mail/outbox.service'
import { startSession } from '#server/features/sessions/start-session'
import { newId } from '#server/ids'
import { invalidFields } from '#server/refusal'
import { write } from '#server/write'
import { emailKey, limitKey } from './email-key'
import { hashPassword } from './passwords/password-hash'
import { guardianFirst, linkUsedOrExpired } from './people.errors'
import type { SignedIn } from './sign-in.service'
import { insertStudent } from './student.repository'
import { getStudio } from './studio.repository'
import { deleteUnusedTokens, markTokenUsed } from './token.repository'
import type { PresentedToken } from './token.service'
import { CONFIRM_LASTS_MS, getUsableToken, issueToken } from './token.service'
import { deleteUnconfirmedStudent, findUser, findUserByEmail, insertUser, markEmailConfirmed } from './user.repository'
import { getViewer } from './viewer.service'

const OLDEST_AGE = 120

/**
 * A student's sign-up. Says and does as much work whether the address is new or known; the letter alone tells, and only
 * the mailbox's holder reads that.
 * @throws Refusal `invalid-fields` for a birth date that is impossible or under the studio's age.
 */
export async function signUp(ctx: Ctx, input: SignUp & { address: string }): Promise<Done> {
  await ctx.limits.take('sign-up-address', input.address)
  await checkAge(ctx, input)
  await ctx.limits.take('mail-account', limitKey(ctx, input.email))
  const passwordHash = await hashPassword(input.password)
  return write(ctx, async (db): Promise<Done> => {
    const key = emailKey(input.email)
    // An unconfirmed sign-up gives way: otherwise a stranger's password would wait behind the link that the holder opens.
    await deleteUnconfirmedStudent(db, key)
    const known = await findUserByEmail(db, key)
    if (known) {
      await queueLetter(db, ctx, {
        letter: 'address-already-known', event: ctx.requestId, subjectId: known.id, to: { userId: known.id },
      })
    }
    else {
      await insertNewStudent(db, ctx, input, passwordHash)
    }
    return { ok: true }
  })
}

async function checkAge(ctx: Ctx, { birthDate, timeZone }: SignUp): Promise<void> {
  const { adult_age: adultAge } = await getStudio(ctx.db)
  const age = ageInYears(birthDate, ctx.nowMs, timeZone)
  if (age < 0) throw invalidFields({ birthDate: 'This day is still to come. Check the year.' })
  if (age > OLDEST_AGE) throw invalidFields({ birthDate: 'This is too long ago. Check the year.' })
  if (age < adultAge) throw guardianFirst(adultAge)
}

async function insertNewStudent(db: Database, ctx: Ctx, input: SignUp, passwordHash: string): Promise<void> {
  const userId = newId(ctx.nowMs)
  await insertUser(db, {
    id: userId,
    email: input.email,
    email_key: emailKey(input.email),
    name: input.name,
    role: 'student',
    time_zone: input.timeZone,
    password_hash: passwordHash,
    email_confirmed_at_ms: null,
    suspended_at_ms: null,
    picture_key: null,
    created_at_ms: ctx.nowMs,
  })
  await insertStudent(db, { user_id: userId, birth_date: input.birthDate, handedness: input.handedness })
  await recordDeed(db, ctx, 'account-made', userId, userId)
  await sendConfirmLetter(db, ctx, userId)
}

/** A new link to confirm the address, by letter; earlier ones go on working until one is used. */
export async function sendConfirmLetter(db: Database, ctx: Ctx, userId: string): Promise<void> {
  const token = await issueToken(db, ctx.nowMs, { userId, purpose: 'confirm', lastsMs: CONFIRM_LASTS_MS })
  await queueLetter(db, ctx, {
    letter: 'confirm-address',
    event: token.id,
    subjectId: token.id,
    to: { userId },
    secret: token.secret,
    expiresAtMs: token.expiresAtMs,
  })
}

/**
 * The link of the letter was opened: the address is theirs, and they are signed in.
 * @throws Refusal `link-used-or-expired` (410).
 */
export async function confirmAddress(ctx: Ctx, input: PresentedToken & { address: string }): Promise<SignedIn> {
  await ctx.limits.take('link-address', input.address)
  const { userId, sessionId } = await write(ctx, async (db) => {
    const token = await getUsableToken(db, ctx, 'confirm', input)
    const user = await findUser(db, token.user_id)
    if (!user || user.suspended_at_ms !== null) throw linkUsedOrExpired()
    if (token.used_at_ms === null) {
      await markTokenUsed(db, token.id, ctx.nowMs)
      await deleteUnusedTokens(db, user.id, 'confirm')
      await markEmailConfirmed(db, user.id, ctx.nowMs)
      await recordDeed(db, ctx, 'address-confirmed', user.id, user.id)
    }
    return { userId: user.id, sessionId: await startSession(db, ctx, user.id) }
  })
  return { viewer: await getViewer(ctx.db, userId), sessionId }
}
