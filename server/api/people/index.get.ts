import { pageQuery } from '#shared/schemas/common'
import type { Page } from '#shared/types/answers'
import type { PersonRow } from '#shared/types/people'
import { listPeople } from '#server/features/people/people.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readQuery } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Page<PersonRow>> => {
  const ctx = await signedIn(event, 'owner')
  return listPeople(ctx, readQuery(event, pageQuery))
}))
