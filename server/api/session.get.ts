import type { SessionAnswer } from '#shared/types/people'
import { findOwnViewer } from '#server/features/people/viewer.service'
import { answer } from '#server/utils/answer'
import { anyone } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<SessionAnswer> => {
  const ctx = await anyone(event)
  return { viewer: await findOwnViewer(ctx), nowMs: ctx.nowMs }
}))
