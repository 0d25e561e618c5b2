import { changePasswordSchema } from '#shared/schemas/accounts'
import type { Done } from '#shared/types/answers'
import { changePassword } from '#server/features/people/password.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Done> => {
  const ctx = await signedIn(event)
  return changePassword(ctx, await readJson(event, changePasswordSchema))
}))
