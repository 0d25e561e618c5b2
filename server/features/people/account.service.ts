import type { Viewer } from '#shared/types/people'
import type { SignedInCtx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import { write } from '#server/write'
import { updateUser } from './user.repository'
import { getViewer } from './viewer.service'

/** What was left out stays as it is. */
export async function changeAccount(ctx: SignedInCtx, change: { name?: string | undefined, timeZone?: string | undefined }): Promise<Viewer> {
  const { viewer } = ctx
  const columns = {
    ...(change.name !== undefined && { name: change.name }),
    ...(change.timeZone !== undefined && { time_zone: change.timeZone }),
  }
  if (Object.keys(columns).length === 0) return getViewer(ctx.db, viewer.id)
  return write(ctx, async (db) => {
    await updateUser(db, viewer.id, columns)
    await recordDeed(db, ctx, 'account-changed', viewer.id)
    return getViewer(db, viewer.id)
  })
}
