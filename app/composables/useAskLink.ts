import { firstScreen } from '~/utils/first-screen'

/** Where the public page's main button leads: to an account, to a new review, or back to the person's own work. */
export function useAskLink() {
  const { viewer } = useViewer()
  return computed(() => {
    if (!viewer.value) return { to: '/sign-up', label: 'Ask a coach' }
    if (viewer.value.role === 'student') return { to: '/reviews/new', label: 'Ask a coach' }
    return { to: firstScreen(viewer.value), label: 'Go to your start' }
  })
}
