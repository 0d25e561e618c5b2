import type { Page } from '#shared/types/answers'

/**
 * The rows of a list that comes in pages: the first page (fetched by the caller, so that the server can render it)
 * and those that the reader asked for after it.
 */
export function useMoreRows<Row>(firstPage: () => Page<Row> | undefined, fetchPage: (cursor: string) => Promise<Page<Row>>) {
  const laterRows = shallowRef<Row[]>([])
  const laterCursor = ref<string | null>()

  const rows = computed(() => [...firstPage()?.items ?? [], ...laterRows.value])
  const nextCursor = computed(() => laterCursor.value === undefined ? firstPage()?.nextCursor ?? null : laterCursor.value)

  const loading = useAction(async (cursor: string) => {
    const page = await fetchPage(cursor)
    laterRows.value = [...laterRows.value, ...page.items]
    laterCursor.value = page.nextCursor
  })

  /** Does nothing when the list is at its end. */
  async function loadMore() {
    if (nextCursor.value !== null) await loading.run(nextCursor.value)
  }

  // A first page that was read again may begin elsewhere; later pages of the old list would then repeat or skip rows.
  watch(firstPage, () => {
    laterRows.value = []
    laterCursor.value = undefined
  })

  return { rows, nextCursor, loadMore, isLoadingMore: loading.isPending, moreProblem: loading.problem }
}
