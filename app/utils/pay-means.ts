/** How a review is paid for: with one that was bought before, or by card at the price that was shown. */
export type PayMeans
  = | { payBy: 'credit' }
    | { payBy: 'card', offerId: string, priceMinor: number }

export type CardMeans = Extract<PayMeans, { payBy: 'card' }>

const keyOf = (reviewId: string) => `turfnote-paying-${reviewId}`

/*
 * What somebody went to the card page for is kept in this tab, so that a page left by the back button can be gone on with.
 * Private windows may refuse to keep it: then it is chosen again.
 */

export function rememberChoice(reviewId: string, { offerId, priceMinor }: CardMeans): void {
  try {
    sessionStorage.setItem(keyOf(reviewId), JSON.stringify({ offerId, priceMinor }))
  }
  catch {
    // Chosen again, then.
  }
}

/** Undefined when nothing was chosen in this tab. */
export function findChoice(reviewId: string): CardMeans | undefined {
  try {
    const kept: unknown = JSON.parse(sessionStorage.getItem(keyOf(reviewId)) ?? 'null')
    if (typeof kept !== 'object' || kept === null || !('offerId' in kept) || !('priceMinor' in kept)) return undefined
    const { offerId, priceMinor } = kept
    return typeof offerId === 'string' && typeof priceMinor === 'number' ? { payBy: 'card', offerId, priceMinor } : undefined
  }
  catch {
    return undefined
  }
}
