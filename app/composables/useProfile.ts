import type { ProfileInput } from '#shared/schemas/profile'
import type { ProfileView } from '#shared/types/profile'

/** What a student says once and every coach reads. Only students have one. */
export function useProfile(isStudent: boolean) {
  const request = useFetch<ProfileView>('/api/profile', { key: 'profile', immediate: isStudent })
  const profile = computed(() => request.data.value ?? undefined)
  const keeping = useAction((input: ProfileInput) => $fetch<ProfileView>('/api/profile', { method: 'PUT', body: input }))

  /** True when the studio has it. */
  async function keep(input: ProfileInput): Promise<boolean> {
    const answer = await keeping.run(input)
    if (answer !== undefined) request.data.value = answer
    return answer !== undefined
  }

  return { profile, error: request.error, isReady: request, keep, keeping }
}
