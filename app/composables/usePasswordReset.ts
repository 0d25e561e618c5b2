import type { Done } from '#shared/types/answers'
import type { SessionAnswer } from '#shared/types/people'

/** Asks for the mail with the link. The answer does not tell whether the address is known. */
export function useForgottenPassword() {
  return useAction((input: { email: string }, headers) => $fetch<Done>('/api/password/forgot', {
    method: 'POST',
    body: input,
    headers,
  }))
}

/** Sets a new password with the token of the mail, and signs in. */
export function usePasswordReset() {
  const { enter } = useEntry()
  return useAction(async (input: { token: string, password: string }, headers) => {
    const answer = await $fetch<SessionAnswer>('/api/password/reset', {
      method: 'POST',
      body: input,
      headers,
    })
    await enter(answer)
    return answer
  })
}
