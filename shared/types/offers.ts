/** `GET /api/offers`. Money is whole minor units and a currency. */
export interface OfferView {
  id: string
  name: string
  kind: 'single' | 'series'
  /** How many reviews it holds; 1 for a single one. */
  reviewCount: number
  priceMinor: number
  currency: string
  /** Working time from paid and complete to answered. */
  turnaroundMs: number
  followUpsIncluded: number
}

export interface OfferList {
  items: OfferView[]
}

/** `GET /api/offers/:id/promise?coach=`. */
export interface PromiseQuote {
  /** Null when the coach's hours hold no such moment within a year. */
  promisedAtMs: number | null
  likelyAtMs: number | null
  available: boolean
  quotedUntilMs: number
  /** Whose hours: a coach's name, or null for the first coach who is free. */
  coachName: string | null
  /** The zone the hours are kept in. */
  timeZone: string
}
