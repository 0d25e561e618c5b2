import { setResponseStatus } from 'h3'
import type { HealthAnswer } from '#shared/types/answers'
import { readHealth } from '#server/features/health.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<HealthAnswer> => {
  const health = await readHealth(await anyone(event))
  if (health.status !== 'ok') setResponseStatus(event, 503)
  return health
}))
