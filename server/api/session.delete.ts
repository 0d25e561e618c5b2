import type { Done } from '#shared/types/answers'
import { signOut } from '#server/features/people/sign-in.service'
import { takeSessionCookie } from '#server/features/sessions/cookie'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<Done> => {
  await signOut(await anyone(event))
  await takeSessionCookie(event)
  return { ok: true }
}))
