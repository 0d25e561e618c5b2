import { profileSchema } from '#shared/schemas/profile'
import type { ProfileView } from '#shared/types/profile'
import { changeProfile } from '#server/features/profile/profile.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ProfileView> => {
  const ctx = await signedIn(event, 'student')
  return changeProfile(ctx, await readJson(event, profileSchema))
}))
