import type { Page } from '#shared/types/answers'
import type { InviteRow, InviteView } from '#shared/types/people'
import type { Ctx, SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { decodeCursor, toPage } from '#server/features/cursor'
import { queueLetter } from '#server/features/mail/outbox.service'
import { hashSecret, newId, newSecret } from '#server/ids'
import { write } from '#server/write'
import { emailKey, limitKey } from './email-key'
import type { InviteTableRow } from './invite.repository'
import { deleteOpenInvites, findInvite, insertInvite, listInvites } from './invite.repository'
import { alreadyHasAccount, linkUsedOrExpired } from './people.errors'
import { getStudio } from './studio.repository'
import { findUser, findUserByEmail } from './user.repository'

const INVITE_LASTS_MS = 7 * 24 * 60 * 60 * 1000

/**
 * Invites a coach or another owner by letter. An open invitation to the same address is replaced: its link stops working.
 * @throws Refusal `already-has-account` (409).
 */
export async function invite(ctx: SignedInCtx, input: { email: string, role: 'coach' | 'owner' }): Promise<InviteRow> {
  await ctx.limits.take('mail-account', limitKey(ctx, input.email))
  return write(ctx, async (db) => {
    const key = emailKey(input.email)
    await checkHasNoAccount(db, key)
    await deleteOpenInvites(db, key)
    const secret = newSecret()
    const row = {
      id: newId(ctx.nowMs),
      email: input.email,
      email_key: key,
      role: input.role,
      token_hash: hashSecret(secret),
      invited_by: ctx.viewer.id,
      created_at_ms: ctx.nowMs,
      expires_at_ms: ctx.nowMs + INVITE_LASTS_MS,
    }
    await insertInvite(db, row)
    await queueLetter(db, ctx, {
      letter: 'invitation',
      event: row.id,
      subjectId: row.id,
      to: { address: input.email },
      secret,
      expiresAtMs: row.expires_at_ms,
    })
    await recordDeed(db, ctx, 'invited', row.id)
    return toRow({ ...row, accepted_at_ms: null }, ctx.nowMs)
  })
}

/** A student's sign-up that nobody confirmed does not count: anyone could have typed the address. */
export async function checkHasNoAccount(db: Database, key: string): Promise<void> {
  const user = await findUserByEmail(db, key)
  if (user && (user.email_confirmed_at_ms !== null || user.role !== 'student')) throw alreadyHasAccount()
}

/** All invitations, newest first. */
export async function listAllInvites(ctx: Ctx, { cursor, limit }: { cursor?: string | undefined, limit: number }): Promise<Page<InviteRow>> {
  const rows = await listInvites(ctx.db, cursor === undefined ? undefined : decodeCursor(cursor), limit + 1)
  return toPage(rows, limit, row => toRow(row, ctx.nowMs), row => ({ atMs: row.created_at_ms, id: row.id }))
}

/**
 * What an invitation says to whoever holds its link.
 * @throws Refusal `link-used-or-expired` (410), for unknown links too.
 */
export async function readInvite(ctx: Ctx, input: { token: string, address: string }): Promise<InviteView> {
  await ctx.limits.take('link-address', input.address)
  const row = await getOpenInvite(ctx.db, input.token, ctx.nowMs)
  const studio = await getStudio(ctx.db)
  const inviter = await findUser(ctx.db, row.invited_by)
  return { email: row.email, role: row.role, inviterName: inviter?.name ?? studio.name, studioName: studio.name, expiresAtMs: row.expires_at_ms }
}

async function getOpenInvite(db: Database, token: string, nowMs: number): Promise<InviteTableRow> {
  const row = await findInvite(db, hashSecret(token))
  if (!row || stateOf(row, nowMs) !== 'open') throw linkUsedOrExpired()
  return row
}

export function stateOf(row: Pick<InviteTableRow, 'accepted_at_ms' | 'expires_at_ms'>, nowMs: number): InviteRow['state'] {
  if (row.accepted_at_ms !== null) return 'accepted'
  return row.expires_at_ms <= nowMs ? 'expired' : 'open'
}

function toRow(row: Omit<InviteTableRow, 'accepted_by'>, nowMs: number): InviteRow {
  return {
    id: row.id,
    email: row.email,
    role: row.role,
    state: stateOf(row, nowMs),
    createdAtMs: row.created_at_ms,
    expiresAtMs: row.expires_at_ms,
  }
}
