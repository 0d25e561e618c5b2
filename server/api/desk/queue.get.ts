import { send } from 'h3'
import { queueQuery } from '#shared/schemas/reviews'
import { readKeptQueue } from '#server/features/reviews/kept-queue'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readQuery } from '#server/utils/input'

/** Answers a `QueueAnswer`, already written as JSON. */
export default defineEventHandler(event => answer(event, async (): Promise<void> => {
  const ctx = await signedIn(event, 'coach', 'owner')
  await send(event, await readKeptQueue(ctx, readQuery(event, queueQuery)), 'application/json')
}))
