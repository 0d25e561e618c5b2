import { acceptInviteSchema } from '#shared/schemas/accounts'
import { tokenParams } from '#shared/schemas/common'
import type { SessionAnswer } from '#shared/types/people'
import { acceptInvite } from '#server/features/people/accept-invite.service'
import { clientAddress } from '#server/features/people/client-address'
import { giveSessionCookie } from '#server/features/sessions/cookie'
import { isRepeated } from '#server/features/sessions/repeated'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<SessionAnswer> => {
  const ctx = await anyone(event)
  const { token } = readParams(event, tokenParams, 'invitation')
  const input = await readJson(event, acceptInviteSchema)
  const { viewer, sessionId } = await acceptInvite(ctx, {
    ...input, token, isRepeated: isRepeated(event, ctx), address: clientAddress(event.node.req, ctx.settings),
  })
  await giveSessionCookie(event, sessionId)
  return { viewer, nowMs: ctx.nowMs }
}, { repeated: 'again' }))
