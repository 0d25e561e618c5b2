import type { QueueAnswer, QueueRow } from '#shared/types/reviews'
import { readErrorAnswer } from '~/utils/errors'

const REFRESH_MS = 30_000

/** What waits for an answer, in order of promise; kept fresh while it is looked at. Wait for `isReady` before drawing. */
export function useQueue() {
  const request = useFetch<QueueAnswer>('/api/desk/queue', { key: 'queue' })
  const { data: queue, error, refresh } = request
  const later = ref<QueueRow[]>([])
  const laterCursor = ref<string | null>()
  const isLoadingMore = ref(false)
  const moreProblem = ref<string>()
  /** True while what is shown is older than it should be; a page once shown is better than an error in its place. */
  const isStale = ref(false)

  const rows = computed(() => {
    const first = queue.value?.items ?? []
    const known = new Set(first.map(row => row.turnaroundId))
    return [...first, ...later.value.filter(row => !known.has(row.turnaroundId))]
  })
  const nextCursor = computed(() => laterCursor.value === undefined ? queue.value?.nextCursor ?? null : laterCursor.value)

  async function loadMore() {
    if (nextCursor.value === null || isLoadingMore.value) return
    isLoadingMore.value = true
    moreProblem.value = undefined
    try {
      const page = await $fetch<QueueAnswer>('/api/desk/queue', { query: { cursor: nextCursor.value } })
      later.value = [...later.value, ...page.items]
      laterCursor.value = page.nextCursor
    }
    catch (failure) {
      moreProblem.value = readErrorAnswer(failure).message
    }
    finally {
      isLoadingMore.value = false
    }
  }

  async function refreshQuietly() {
    if (document.visibilityState !== 'visible') return
    try {
      queue.value = await $fetch<QueueAnswer>('/api/desk/queue')
      isStale.value = false
    }
    catch {
      isStale.value = true
    }
  }

  let timer: number | undefined
  onMounted(() => {
    timer = window.setInterval(() => void refreshQuietly(), REFRESH_MS)
    document.addEventListener('visibilitychange', refreshQuietly)
  })
  onScopeDispose(() => {
    if (!import.meta.client) return
    window.clearInterval(timer)
    document.removeEventListener('visibilitychange', refreshQuietly)
  })

  return { queue, isReady: request, rows, nextCursor, error, refresh, loadMore, isLoadingMore, moreProblem, isStale }
}
