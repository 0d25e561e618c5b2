import { findInviteById } from '#server/features/people/invite.repository'
import { stateOf } from '#server/features/people/invite.service'
import type { TokenRow } from '#server/features/people/token.repository'
import { findTokenById } from '#server/features/people/token.repository'
import { findUser } from '#server/features/people/user.repository'
import { writeLetter } from '../letters'
import type { Composer, Material } from './material'
import { pageUrl } from './material'
import { formatMoment } from '#shared/utils/times'

export const confirmAddress: Composer = async (material) => {
  const link = await findLiveLink(material, 'confirm')
  return link && writeLetter('confirm-address', {
    studioName: material.studio.name,
    name: link.name,
    confirmUrl: pageUrl(material.ctx, '/confirm', link.secret),
    validUntilText: link.validUntilText,
  })
}

export const forgottenPassword: Composer = async (material) => {
  const link = await findLiveLink(material, 'reset')
  return link && writeLetter('forgotten-password', {
    studioName: material.studio.name,
    name: link.name,
    resetUrl: pageUrl(material.ctx, '/reset', link.secret),
    validUntilText: link.validUntilText,
  })
}

/** A letter whose link was used or replaced while it waited would only mislead. */
async function findLiveLink({ ctx, row, reader, timeZone }: Material, purpose: TokenRow['purpose']) {
  const token = await findTokenById(ctx.db, row.subject_id)
  if (!reader || row.secret === null || token?.purpose !== purpose || token.used_at_ms !== null) return undefined
  return { name: reader.name, secret: row.secret, validUntilText: formatMoment(token.expires_at_ms, timeZone) }
}

export const addressAlreadyKnown: Composer = async ({ ctx, studio, reader }) => reader && writeLetter('address-already-known', {
  studioName: studio.name,
  name: reader.name,
  signInUrl: pageUrl(ctx, '/sign-in'),
  forgotUrl: pageUrl(ctx, '/forgot'),
})

export const passwordChanged: Composer = async ({ ctx, row, studio, reader, timeZone }) => reader && writeLetter('password-changed', {
  studioName: studio.name,
  name: reader.name,
  whenText: formatMoment(row.created_at_ms, timeZone),
  forgotUrl: pageUrl(ctx, '/forgot'),
})

export const invitation: Composer = async ({ ctx, row, studio, timeZone }) => {
  const invite = await findInviteById(ctx.db, row.subject_id)
  if (!invite || row.secret === null || stateOf(invite, ctx.nowMs) !== 'open') return undefined
  const inviter = await findUser(ctx.db, invite.invited_by)
  return writeLetter('invitation', {
    studioName: studio.name,
    inviterName: inviter?.name ?? studio.name,
    role: invite.role,
    inviteUrl: pageUrl(ctx, '/invite', row.secret),
    validUntilText: formatMoment(invite.expires_at_ms, timeZone),
  })
}
