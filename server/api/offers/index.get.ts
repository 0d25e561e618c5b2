import type { OfferList } from '#shared/types/offers'
import { listOffers } from '#server/features/offers/offer.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<OfferList> => listOffers(await anyone(event))))
