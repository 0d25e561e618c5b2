import type { SessionAnswer } from '#shared/types/people'

/** For the owners of the studio. */
export default defineNuxtRouteMiddleware((to) => {
  const viewer = useNuxtData<SessionAnswer>(sessionKey).data.value?.viewer
  if (!viewer) return navigateTo({ path: '/sign-in', query: { to: to.fullPath } })
  if (viewer.role !== 'owner') {
    return abortNavigation({ fatal: true, statusCode: 403, statusMessage: 'Forbidden', message: 'This page is for the owners of the studio.' })
  }
})
