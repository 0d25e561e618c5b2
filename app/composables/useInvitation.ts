import type { InviteView, SessionAnswer } from '#shared/types/people'

export interface InviteAcceptance {
  name: string
  password: string
  timeZone: string
}

/** One invitation, as the invited person sees it by the link of the mail. */
export function useInvitation(token: string) {
  const path = `/api/invites/${encodeURIComponent(token)}`
  const { enter } = useEntry()
  const invitation = useFetch<InviteView>(path, { key: `invitation-${token}`, immediate: token.length > 0 })

  const acceptance = useAction(async (input: InviteAcceptance, headers) => {
    const answer = await $fetch<SessionAnswer>(`${path}/accept`, {
      method: 'POST',
      body: input,
      headers,
    })
    await enter(answer)
    return answer
  })

  return { invitation, acceptance }
}
