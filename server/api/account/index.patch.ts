import { accountSchema } from '#shared/schemas/accounts'
import type { Viewer } from '#shared/types/people'
import { changeAccount } from '#server/features/people/account.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Viewer> => {
  const ctx = await signedIn(event)
  return changeAccount(ctx, await readJson(event, accountSchema))
}))
