import { randomUUID } from 'node:crypto'
import type { Viewer } from '#shared/types/people'
import { StoreUnavailable } from '#server/adapters/storage'
import type { Ctx, SignedInCtx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import { Refusal, invalidFields, notFound } from '#server/refusal'
import { write } from '#server/write'
import { makePicture } from './picture'
import { findVisiblePictureKey } from './picture.repository'
import type { Upload } from '#server/utils/read-upload'
import { findUser, updateUser } from './user.repository'
import { getViewer } from './viewer.service'

const ADDRESS_LASTS_SECONDS = 300

/** Counted before the body is read, so that refused tries cost nothing. @throws Refusal `too-many-tries` (429). */
export async function takePictureAllowance(ctx: SignedInCtx): Promise<void> {
  await ctx.limits.take('picture-account', ctx.viewer.id)
}

/** @throws Refusal `not-a-picture` (415), `too-many-pixels` (422), `invalid-fields` (422) without a file, `store-unavailable` (503). */
export async function changePicture(ctx: SignedInCtx, uploads: readonly Upload[]): Promise<Viewer> {
  const upload = uploads.find(({ field }) => field === 'picture')
  if (!upload) throw invalidFields({ picture: 'Choose a picture.' })
  const picture = await makePicture(upload.bytes)
  const key = `pictures/${randomUUID()}.webp`
  await ctx.storage.put(key, picture, 'image/webp').catch((error: unknown) => {
    throw error instanceof StoreUnavailable ? storeUnavailable() : error
  })
  try {
    return await setPicture(ctx, key)
  }
  catch (error) {
    await removeObject(ctx, key)
    throw error
  }
}

/** Taking away what is not there is no error. */
export async function removePicture(ctx: SignedInCtx): Promise<Viewer> {
  return setPicture(ctx, null)
}

async function setPicture(ctx: SignedInCtx, key: string | null): Promise<Viewer> {
  const { viewer } = ctx
  const { formerKey, answer } = await write(ctx, async (db) => {
    const formerKey = (await findUser(db, viewer.id))?.picture_key ?? null
    if (formerKey !== key) {
      await updateUser(db, viewer.id, { picture_key: key })
      await recordDeed(db, ctx, key === null ? 'picture-removed' : 'picture-changed', viewer.id)
    }
    return { formerKey, answer: await getViewer(db, viewer.id) }
  })
  if (formerKey !== null) await removeObject(ctx, formerKey)
  return answer
}

/** Nothing points to it any more, so a store that is down only leaves some bytes lying: the log says which. */
async function removeObject(ctx: Ctx, key: string): Promise<void> {
  await ctx.storage.remove(key).catch((error: unknown) => {
    ctx.log.warn({ requestId: ctx.requestId, key, err: error }, 'picture left in the store')
  })
}

/**
 * An address in the store under which the picture of `personId` can be read for five minutes.
 * @throws Refusal `not-found` (404) when there is none or the viewer may not see the person.
 */
export async function getPictureAddress(ctx: SignedInCtx, personId: string): Promise<string> {
  const key = await findVisiblePictureKey(ctx.db, ctx.viewer, personId)
  if (key === undefined) throw notFound('picture')
  return ctx.storage.presignGet(key, ADDRESS_LASTS_SECONDS)
}

function storeUnavailable(): Refusal {
  return new Refusal('unavailable', 'store-unavailable', 'The picture could not be stored just now. Try again in a moment.', undefined, 30)
}
