import { resetSchema } from '#shared/schemas/accounts'
import type { SessionAnswer } from '#shared/types/people'
import { clientAddress } from '#server/features/people/client-address'
import { resetPassword } from '#server/features/people/password.service'
import { giveSessionCookie } from '#server/features/sessions/cookie'
import { isRepeated } from '#server/features/sessions/repeated'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<SessionAnswer> => {
  const ctx = await anyone(event)
  const input = await readJson(event, resetSchema)
  const { viewer, sessionId } = await resetPassword(ctx, {
    ...input, isRepeated: isRepeated(event, ctx), address: clientAddress(event.node.req, ctx.settings),
  })
  await giveSessionCookie(event, sessionId)
  return { viewer, nowMs: ctx.nowMs }
}, { repeated: 'again' }))
