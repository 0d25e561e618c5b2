import { signInSchema } from '#shared/schemas/accounts'
import type { SessionAnswer } from '#shared/types/people'
import { clientAddress } from '#server/features/people/client-address'
import { signIn } from '#server/features/people/sign-in.service'
import { giveSessionCookie } from '#server/features/sessions/cookie'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<SessionAnswer> => {
  const ctx = await anyone(event)
  const input = await readJson(event, signInSchema)
  const { viewer, sessionId } = await signIn(ctx, { ...input, address: clientAddress(event.node.req, ctx.settings) })
  await giveSessionCookie(event, sessionId)
  return { viewer, nowMs: ctx.nowMs }
}, { repeated: 'again' }))
