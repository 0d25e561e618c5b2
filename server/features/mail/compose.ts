import type { Ctx } from '#server/context'
import { findStudio } from '#server/features/people/studio.repository'
import { findUser } from '#server/features/people/user.repository'
import { addressAlreadyKnown, confirmAddress, forgottenPassword, invitation, passwordChanged } from './compose/account-letters'
import type { Composer } from './compose/material'
import { moneyBack, receipt } from './compose/money-letters'
import { answered, reviewSent, reviewWaiting } from './compose/review-letters'
import type { Letter, LetterName } from './letters'
import { isLetterName } from './letters'
import type { OutboxRow } from './outbox.repository'

/** A letter with its reader, as the mailer takes it. */
export interface ComposedLetter extends Letter {
  to: { name: string, address: string }
}

const COMPOSERS: Record<LetterName, Composer> = {
  'confirm-address': confirmAddress,
  'address-already-known': addressAlreadyKnown,
  'forgotten-password': forgottenPassword,
  'password-changed': passwordChanged,
  'invitation': invitation,
  'money-back': moneyBack,
  'receipt': receipt,
  'review-sent': reviewSent,
  'review-waiting': reviewWaiting,
  'answered': answered,
}

/**
 * Writes a queued letter from what its row points to, as things stand now.
 * @returns undefined when what it speaks of is gone or no longer so: it is not to be sent.
 */
export async function composeLetter(ctx: Ctx, row: OutboxRow): Promise<ComposedLetter | undefined> {
  const studio = await findStudio(ctx.db)
  const reader = row.user_id === null ? undefined : await findUser(ctx.db, row.user_id)
  const to = reader ? { name: reader.name, address: reader.email } : row.address !== null && { name: '', address: row.address }
  if (!studio || !to || !isLetterName(row.letter)) return undefined
  const letter = await COMPOSERS[row.letter]({ ctx, row, studio, reader, timeZone: reader?.time_zone ?? studio.time_zone })
  return letter && { ...letter, to }
}
