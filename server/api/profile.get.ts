import type { ProfileView } from '#shared/types/profile'
import { readProfile } from '#server/features/profile/profile.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<ProfileView> => {
  return readProfile(await signedIn(event, 'student'))
}))
