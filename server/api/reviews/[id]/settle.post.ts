import type { Done } from '#shared/types/answers'
import { emptySchema, idParams } from '#shared/schemas/common'
import { returnFromPage } from '#server/features/money/settle.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Done> => {
  const ctx = await signedIn(event, 'student', 'guardian')
  await readJson(event, emptySchema)
  return returnFromPage(ctx, readParams(event, idParams, 'review'))
}))
