import type { SessionAnswer } from '#shared/types/people'

/** For signed-in people; others sign in first and come back to the page they asked for. */
export default defineNuxtRouteMiddleware((to) => {
  if (!useNuxtData<SessionAnswer>(sessionKey).data.value?.viewer) {
    return navigateTo({ path: '/sign-in', query: { to: to.fullPath } })
  }
})
