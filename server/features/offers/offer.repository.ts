import type { Database } from '#server/database/client'

/** Offers that are sold now, each in its newest version. */
export async function listSoldOffers(db: Database) {
  return soldOffers(db).orderBy('offers.sort_order').orderBy('offers.id').limit(50).execute()
}

export async function findSoldOffer(db: Database, offerId: string) {
  return soldOffers(db).where('offers.id', '=', offerId).executeTakeFirst()
}

export type OfferRecord = NonNullable<Awaited<ReturnType<typeof findSoldOffer>>>

function soldOffers(db: Database) {
  return db.selectFrom('offers')
    .innerJoin('offer_versions', 'offer_versions.offer_id', 'offers.id')
    .selectAll('offer_versions')
    .select('offers.kind')
    .where('offers.is_sold', '=', 1)
    .where(eb => eb('offer_versions.version', '=', eb.selectFrom('offer_versions as newest')
      .select(newest => newest.fn.max('newest.version').as('version'))
      .whereRef('newest.offer_id', '=', 'offers.id')))
}
