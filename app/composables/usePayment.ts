import type { Done } from '#shared/types/answers'
import type { ReviewView, SubmitAnswer } from '#shared/types/reviews'
import { findChoice } from '~/utils/pay-means'

/** Paying for a review that went to the card page, and taking a review back. */
export function usePayment(id: string, refresh: () => Promise<void>) {
  const { refresh: refreshViewer } = useViewer()
  const settling = useDeed()
  const paying = useDeed()
  const withdrawing = useDeed()

  /** Asks the provider how the card page ended and reads the review anew. False when the provider gave no answer. */
  async function settle(): Promise<boolean> {
    const done = await settling.run(headers => $fetch<Done>(`/api/reviews/${id}/settle`, { method: 'POST', headers, body: {} }))
    await Promise.all([refresh(), refreshViewer()])
    return done !== undefined
  }

  /** The card page that is open, or a new one for the same offer; undefined when it must be chosen anew (see `paying.problem`). */
  async function findCardPage(): Promise<string | undefined> {
    const choice = findChoice(id)
    if (choice === undefined) return undefined
    const answer = await paying.run(headers => $fetch<SubmitAnswer>(`/api/reviews/${id}/submit`, { method: 'POST', headers, body: choice }), JSON.stringify(choice))
    return answer?.checkoutUrl ?? undefined
  }

  /** True when the review is withdrawn. */
  async function withdraw(): Promise<boolean> {
    const answer = await withdrawing.run(headers => $fetch<ReviewView>(`/api/reviews/${id}/withdraw`, { method: 'POST', headers, body: {} }))
    await Promise.all([refresh(), refreshViewer()])
    return answer !== undefined
  }

  return { settle, settling, findCardPage, paying, withdraw, withdrawing }
}
