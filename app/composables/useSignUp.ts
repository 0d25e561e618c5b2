import type { SignUp } from '#shared/schemas/accounts'
import type { Done } from '#shared/types/answers'
import type { SessionAnswer } from '#shared/types/people'

/** A student's sign-up. The answer is the same whether the address is new or known; the rest is said by mail. */
export function useSignUp() {
  return useAction((input: SignUp, headers) => $fetch<Done>('/api/accounts', {
    method: 'POST',
    body: input,
    headers,
  }))
}

/** Confirms an address with the token of the mail, and signs in. */
export function useConfirmation() {
  const { enter } = useEntry()
  return useAction(async (input: { token: string }, headers) => {
    const answer = await $fetch<SessionAnswer>('/api/accounts/confirm', {
      method: 'POST',
      body: input,
      headers,
    })
    await enter(answer)
    return answer
  })
}
