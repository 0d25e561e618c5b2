import type { Viewer } from '#shared/types/people'
import { getViewer } from '#server/features/people/viewer.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<Viewer> => {
  const { db, viewer } = await signedIn(event)
  return getViewer(db, viewer.id)
}))
