import { tokenParams } from '#shared/schemas/common'
import type { InviteView } from '#shared/types/people'
import { clientAddress } from '#server/features/people/client-address'
import { readInvite } from '#server/features/people/invite.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<InviteView> => {
  const ctx = await anyone(event)
  const { token } = readParams(event, tokenParams, 'invitation')
  return readInvite(ctx, { token, address: clientAddress(event.node.req, ctx.settings) })
}))
