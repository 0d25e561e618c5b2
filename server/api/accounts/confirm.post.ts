import { confirmSchema } from '#shared/schemas/accounts'
import type { SessionAnswer } from '#shared/types/people'
import { clientAddress } from '#server/features/people/client-address'
import { confirmAddress } from '#server/features/people/sign-up.service'
import { giveSessionCookie } from '#server/features/sessions/cookie'
import { isRepeated } from '#server/features/sessions/repeated'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<SessionAnswer> => {
  const ctx = await anyone(event)
  const { token } = await readJson(event, confirmSchema)
  const { viewer, sessionId } = await confirmAddress(ctx, {
    token, isRepeated: isRepeated(event, ctx), address: clientAddress(event.node.req, ctx.settings),
  })
  await giveSessionCookie(event, sessionId)
  return { viewer, nowMs: ctx.nowMs }
}, { repeated: 'again' }))
