import type { ReviewView } from '#shared/types/reviews'

/** One review: its address, its cache, and the coach's moves on it. Wait for `isReady` before drawing. */
export function useReview(id: string) {
  const request = useFetch<ReviewView>(`/api/reviews/${id}`, { key: `review-${id}` })
  const { data: review, error, refresh } = request
  const takingUp = useDeed()
  const puttingBack = useDeed()

  async function move(name: 'take-up' | 'put-back', deed: ReturnType<typeof useDeed>): Promise<boolean> {
    const answer = await deed.run(headers => $fetch<ReviewView>(`/api/reviews/${id}/${name}`, { method: 'POST', headers, body: {} }))
    if (answer !== undefined) review.value = answer
    // Somebody else was quicker: show who has it now.
    else if (deed.problem.value?.statusCode === 409) await refresh()
    return answer !== undefined
  }

  /** True when the review is now in the reader's hand. */
  const takeUp = () => move('take-up', takingUp)
  /** True when it waits in the queue again. */
  const putBack = () => move('put-back', puttingBack)

  return { review, error, refresh, isReady: request, takeUp, takingUp, putBack, puttingBack }
}
