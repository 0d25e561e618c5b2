import type { Page } from '#shared/types/answers'
import type { PersonRow } from '#shared/types/people'

/** Everybody with an account in the studio, for the owner. */
export function usePeople() {
  const list = useFetch<Page<PersonRow>>('/api/people', { key: 'people' })
  const more = useMoreRows<PersonRow>(
    () => list.data.value,
    cursor => $fetch<Page<PersonRow>>('/api/people', { query: { cursor } }),
  )
  return { list, people: more }
}
