import type { SignIn } from '#shared/schemas/accounts'
import type { SessionAnswer } from '#shared/types/people'
import { findReturnPath, firstScreen } from '~/utils/first-screen'
import { findQuestion } from '~/utils/kept-question'

/** Goes on after signing in: to the page that was asked for (`?to=`), to a question begun before, else to the person's first screen. */
export function useEntry() {
  const route = useRoute()
  const { refresh } = useViewer()

  async function enter(answer: SessionAnswer) {
    await refresh()
    const start = answer.viewer ? firstScreen(answer.viewer) : '/'
    // A question that was asked before there was an account goes on.
    const asked = answer.viewer?.role === 'student' && findQuestion() !== undefined ? '/reviews/new?step=send' : undefined
    await navigateTo(findReturnPath(route.query.to) ?? asked ?? start)
  }

  return { enter }
}

/** Signing in with e-mail and password. */
export function useSignIn() {
  const { enter } = useEntry()
  return useAction(async (input: SignIn, headers) => {
    const answer = await $fetch<SessionAnswer>('/api/session', {
      method: 'POST',
      body: input,
      headers,
    })
    await enter(answer)
    return answer
  })
}
