import type { SessionAnswer } from '#shared/types/people'
import { findReturnPath, firstScreen } from '~/utils/first-screen'

/** For pages that make no sense once signed in: on to the page asked for, else to the first screen. */
export default defineNuxtRouteMiddleware((to) => {
  const viewer = useNuxtData<SessionAnswer>(sessionKey).data.value?.viewer
  if (viewer) return navigateTo(findReturnPath(to.query.to) ?? firstScreen(viewer))
})
