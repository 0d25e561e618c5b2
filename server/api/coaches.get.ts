import type { CoachList } from '#shared/types/people'
import { listStudioCoaches } from '#server/features/people/people.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<CoachList> => {
  return listStudioCoaches(await anyone(event))
}))
