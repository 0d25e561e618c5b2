import sharp from 'sharp'
import { Refusal } from '#server/refusal'

const MAX_PIXELS = 40_000_000
/** Stops what takes long to unpack, whatever it claims to be. */
const MAX_SECONDS = 10
const WEBP_QUALITY = 82

export interface RemadePicture {
  bytes: Buffer
  widthPx: number
  heightPx: number
}

export interface PictureShape {
  widthPx: number
  heightPx: number
  /** `cover` cuts to exactly this size; `inside` keeps the whole picture, at most this large and never enlarged. */
  fit: 'cover' | 'inside'
  /** The form's field, where a refusal names one. */
  field: string
}

/**
 * A picture made anew from what was sent: WebP, upright, with nothing of the file's own tags (place, device, time). Of a moving picture the
 * first frame.
 * @throws Refusal `not-a-picture` (415) for what is not a readable JPEG, PNG or WebP, whatever its name says; `too-many-pixels` (422) above 40 million.
 */
export async function remakePicture(bytes: Buffer, { widthPx, heightPx, fit, field }: PictureShape): Promise<RemadePicture> {
  // Looked at before the decoder sees it: it also reads formats that can hold programs, or addresses to fetch from.
  if (!isPicture(bytes)) throw notAPicture()
  const { width, height } = await sharp(bytes, { limitInputPixels: false }).metadata().catch(() => {
    throw notAPicture()
  })
  if (width * height > MAX_PIXELS) throw tooManyPixels(field)
  try {
    const { data, info } = await sharp(bytes, { limitInputPixels: MAX_PIXELS, failOn: 'error', pages: 1 })
      .timeout({ seconds: MAX_SECONDS })
      .autoOrient()
      .resize(widthPx, heightPx, { fit, withoutEnlargement: fit === 'inside' })
      .webp({ quality: WEBP_QUALITY })
      .toBuffer({ resolveWithObject: true })
    return { bytes: data, widthPx: info.width, heightPx: info.height }
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

function tooManyPixels(field: string): Refusal {
  return new Refusal('invalid', 'too-many-pixels', 'This picture has more than 40 million pixels. Send a smaller one.', { [field]: 'Send a smaller picture.' })
}
