import type { Page } from '#shared/types/answers'
import type { ReviewRow } from '#shared/types/reviews'

/** The reader's reviews, newest first, a page at a time. Wait for `isReady` before drawing. */
export function useReviews() {
  const request = useFetch<Page<ReviewRow>>('/api/reviews', { key: 'reviews' })
  const more = useMoreRows<ReviewRow>(
    () => request.data.value,
    cursor => $fetch<Page<ReviewRow>>('/api/reviews', { query: { cursor } }),
  )
  return { ...more, error: request.error, refresh: request.refresh, isReady: request }
}
