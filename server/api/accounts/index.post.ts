import { signUpSchema } from '#shared/schemas/accounts'
import type { Done } from '#shared/types/answers'
import { clientAddress } from '#server/features/people/client-address'
import { signUp } from '#server/features/people/sign-up.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Done> => {
  const ctx = await anyone(event)
  const input = await readJson(event, signUpSchema)
  return signUp(ctx, { ...input, address: clientAddress(event.node.req, ctx.settings) })
}, { status: 202 }))
