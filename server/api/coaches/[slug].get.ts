import type { CoachBrief } from '#shared/types/people'
import { slugParams } from '#shared/schemas/common'
import { readCoach } from '#server/features/people/people.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<CoachBrief> => {
  return readCoach(await anyone(event), readParams(event, slugParams, 'coach'))
}))
