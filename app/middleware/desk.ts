import type { SessionAnswer } from '#shared/types/people'

/** For those who answer, and owners who watch over the queue without coaching. */
export default defineNuxtRouteMiddleware((to) => {
  const viewer = useNuxtData<SessionAnswer>(sessionKey).data.value?.viewer
  if (!viewer) return navigateTo({ path: '/sign-in', query: { to: to.fullPath } })
  if (!viewer.isCoach && viewer.role !== 'owner') {
    return abortNavigation({ fatal: true, statusCode: 403, statusMessage: 'Forbidden', message: 'This page is for coaches.' })
  }
})
