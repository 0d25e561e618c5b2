import sharp from 'sharp'
import { Refusal } from '#server/refusal'

const SIDE_PX = 512
const MAX_PIXELS = 40_000_000
/** Stops what takes long to unpack, whatever it claims to be. */
const MAX_SECONDS = 10

/**
 * A profile picture made anew from what was sent: a square of 512 by 512 pixels, WebP, upright, with nothing of the file's own tags (place,
 * device, time). Of a moving picture the first frame.
 * @throws Refusal `not-a-picture` (415) for what is not a readable JPEG, PNG or WebP, whatever its name says; `too-many-pixels` (422) above 40 million.
 */
export async function makePicture(bytes: Buffer): Promise<Buffer> {
  // Looked at before the decoder sees it: it also reads formats that can hold programs, or addresses to fetch from.
  if (!isPicture(bytes)) throw notAPicture()
  const { width, height } = await sharp(bytes, { limitInputPixels: false }).metadata().catch(() => {
    throw notAPicture()
  })
  if (width * height > MAX_PIXELS) throw tooManyPixels()
  try {
    return await sharp(bytes, { limitInputPixels: MAX_PIXELS, failOn: 'error', pages: 1 })
      .timeout({ seconds: MAX_SECONDS })
      .autoOrient()
      .resize(SIDE_PX, SIDE_PX, { fit: 'cover' })
      .webp({ quality: 82 })
      .toBuffer()
  }
  catch {
    throw notAPicture()
  }
}

const PNG_SIGNATURE = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a])

function isPicture(bytes: Buffer): boolean {
  const isJpeg = bytes.subarray(0, 3).equals(Buffer.from([0xff, 0xd8, 0xff]))
  const isPng = bytes.subarray(0, 8).equals(PNG_SIGNATURE)
  const isWebp = bytes.toString('latin1', 0, 4) === 'RIFF' && bytes.toString('latin1', 8, 12) === 'WEBP'
  return isJpeg || isPng || isWebp
}

function notAPicture(): Refusal {
  return new Refusal('wrong-kind', 'not-a-picture', 'This is not a picture that can be read. Send a JPEG, PNG or WebP.')
}

function tooManyPixels(): Refusal {
  return new Refusal('invalid', 'too-many-pixels', 'This picture has more than 40 million pixels. Send a smaller one.', { picture: 'Send a smaller picture.' })
}
