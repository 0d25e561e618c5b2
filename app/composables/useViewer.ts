import type { SessionAnswer } from '#shared/types/people'

/** The key under which the session is kept; route guards read it without asking again. */
export const sessionKey = 'session'

/** Asks who is here. Once for each page load, by the plugin: on the server every further call would ask again. */
export function useSessionAnswer() {
  return useFetch<SessionAnswer>('/api/session', { key: sessionKey })
}

/**
 * The signed-in person, or null, shared by all who ask.
 * `refresh` after signing in; signing out loads the site afresh, so that nothing of the person stays in memory.
 */
export function useViewer() {
  const { data } = useNuxtData<SessionAnswer>(sessionKey)
  const viewer = computed(() => data.value?.viewer ?? null)

  async function refresh() {
    await refreshNuxtData(sessionKey)
  }

  async function signOut() {
    await $fetch('/api/session', { method: 'DELETE' })
    reloadNuxtApp({ path: '/', force: true })
  }

  return { viewer, refresh, signOut }
}
