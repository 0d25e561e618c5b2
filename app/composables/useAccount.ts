import type { Done } from '#shared/types/answers'
import type { Viewer } from '#shared/types/people'

/** What a person can change about the own account; each change is shown everywhere at once by reading the session again. */
export function useAccount() {
  const { refresh } = useViewer()

  const saving = useAction(async (input: { name: string, timeZone: string }) => {
    const viewer = await $fetch<Viewer>('/api/account', { method: 'PATCH', body: input })
    await refresh()
    return viewer
  })

  const passwordChange = useAction((input: { current: string, next: string }) =>
    $fetch<Done>('/api/password', { method: 'PUT', body: input }))

  return { saving, passwordChange }
}

/** The profile picture. */
export function usePicture() {
  const { refresh } = useViewer()

  const sending = useAction(async (file: File) => {
    const body = new FormData()
    body.append('picture', file)
    const viewer = await $fetch<Viewer>('/api/account/picture', { method: 'PUT', body })
    await refresh()
    return viewer
  })

  const removal = useAction(async () => {
    const viewer = await $fetch<Viewer>('/api/account/picture', { method: 'DELETE' })
    await refresh()
    return viewer
  })

  return { sending, removal }
}
