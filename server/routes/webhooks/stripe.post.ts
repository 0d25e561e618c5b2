import { getRequestHeader } from 'h3'
import { receiveEvent } from '#server/features/money/provider-event.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readBodyText } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<{ received: true }> => {
  const ctx = await anyone(event)
  const signature = getRequestHeader(event, 'stripe-signature') ?? ''
  return receiveEvent(ctx, { body: await readBodyText(event), signature })
}))
