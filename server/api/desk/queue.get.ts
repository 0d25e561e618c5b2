import type { QueueAnswer } from '#shared/types/reviews'
import { queueQuery } from '#shared/schemas/reviews'
import { readQueue } from '#server/features/reviews/queue.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readQuery } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<QueueAnswer> => {
  const ctx = await signedIn(event, 'coach', 'owner')
  return readQueue(ctx, readQuery(event, queueQuery))
}))
