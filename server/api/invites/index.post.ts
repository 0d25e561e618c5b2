import { inviteSchema } from '#shared/schemas/accounts'
import type { InviteRow } from '#shared/types/people'
import { invite } from '#server/features/people/invite.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<InviteRow> => {
  const ctx = await signedIn(event, 'owner')
  return invite(ctx, await readJson(event, inviteSchema))
}))
