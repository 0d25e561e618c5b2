import { remakePicture } from '#server/features/uploads/remake-picture'

const SIDE_PX = 512

/** A profile picture: a square of 512 by 512 pixels, WebP. @throws as `remakePicture`. */
export async function makePicture(bytes: Buffer): Promise<Buffer> {
  const made = await remakePicture(bytes, { widthPx: SIDE_PX, heightPx: SIDE_PX, fit: 'cover', field: 'picture' })
  return made.bytes
}
