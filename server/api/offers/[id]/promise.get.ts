import type { PromiseQuote } from '#shared/types/offers'
import { idParams } from '#shared/schemas/common'
import { promiseQuery } from '#shared/schemas/reviews'
import { quotePromise } from '#server/features/offers/offer.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readParams, readQuery } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<PromiseQuote> => {
  const ctx = await anyone(event)
  const { id } = readParams(event, idParams, 'offer')
  return quotePromise(ctx, { offerId: id, coachId: readQuery(event, promiseQuery).coach })
}))
