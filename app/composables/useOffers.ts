import type { MaybeRefOrGetter } from 'vue'
import type { OfferList, PromiseQuote } from '#shared/types/offers'
import type { CoachBrief, CoachList } from '#shared/types/people'

/** What is sold. */
export function useOffers() {
  const request = useFetch<OfferList>('/api/offers', { key: 'offers' })
  return { offers: computed(() => request.data.value?.items ?? []), error: request.error, isReady: request }
}

/** Coaches who take reviews. */
export function useCoaches() {
  const request = useFetch<CoachList>('/api/coaches', { key: 'coaches' })
  return { coaches: computed(() => request.data.value?.items ?? []), error: request.error, isReady: request }
}

/** The coach of a link; an error 404 when there is none. */
export function useCoach(slug: string) {
  const request = useFetch<CoachBrief>(`/api/coaches/${encodeURIComponent(slug)}`, { key: `coach-${slug}` })
  return { coach: request.data, error: request.error, isReady: request }
}

/** By when an answer would come, for one offer and one coach (empty: the first who is free). Asked only when `ask` is called. */
export function usePromise(offerId: MaybeRefOrGetter<string | undefined>, coachId: MaybeRefOrGetter<string>) {
  const { data: quote, error, status, execute } = useFetch<PromiseQuote>(() => `/api/offers/${toValue(offerId)}/promise`, {
    key: 'promise',
    query: computed(() => ({ coach: toValue(coachId) || undefined })),
    immediate: false,
    watch: false,
  })
  return { quote, error, isAsking: computed(() => status.value === 'pending'), ask: execute }
}
