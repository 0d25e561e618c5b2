import type { SessionAnswer } from '#shared/types/people'

/** The key under which the session is kept; route guards read it without asking again. */
export const sessionKey = 'session'

/**
 * The signed-in person, fetched once for each page load and shared by all who ask.
 * `refresh` after signing in; signing out loads the site afresh, so that nothing of the person stays in memory.
 */
export function useViewer() {
  const session = useFetch<SessionAnswer>('/api/session', {
    key: sessionKey,
    dedupe: 'defer',
    // Each component that asks would otherwise fetch again on every change of page.
    getCachedData: (key, nuxtApp, context) => context.cause === 'refresh:manual' ? undefined : nuxtApp.payload.data[key],
  })
  const viewer = computed(() => session.data.value?.viewer ?? null)

  async function signOut() {
    await $fetch('/api/session', { method: 'DELETE' })
    reloadNuxtApp({ path: '/', force: true })
  }

  return { viewer, isReady: session, refresh: session.refresh, signOut }
}
