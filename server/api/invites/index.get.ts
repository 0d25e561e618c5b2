import { pageQuery } from '#shared/schemas/common'
import type { Page } from '#shared/types/answers'
import type { InviteRow } from '#shared/types/people'
import { listAllInvites } from '#server/features/people/invite.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readQuery } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Page<InviteRow>> => {
  const ctx = await signedIn(event, 'owner')
  return listAllInvites(ctx, readQuery(event, pageQuery))
}))
