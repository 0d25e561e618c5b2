import type { Page } from '#shared/types/answers'
import type { InviteRow } from '#shared/types/people'

export interface NewInvite {
  email: string
  role: InviteRow['role']
}

/** The invitations of the studio, newest first, and sending another one. */
export function useInvites() {
  const list = useFetch<Page<InviteRow>>('/api/invites', { key: 'invites' })
  const more = useMoreRows<InviteRow>(
    () => list.data.value,
    cursor => $fetch<Page<InviteRow>>('/api/invites', { query: { cursor } }),
  )

  const sending = useAction(async (input: NewInvite, headers) => {
    const row = await $fetch<InviteRow>('/api/invites', {
      method: 'POST',
      body: input,
      headers,
    })
    await list.refresh()
    return row
  })

  return { list, invites: more, sending }
}
