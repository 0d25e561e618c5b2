import { canEncodeVideo, Quality } from 'mediabunny'
import type { ClipEncoder } from './clip-facts'
import type { PictureSize } from './picture-size'

const CODECS = ['avc', 'vp9'] as const

/**
 * What this browser can encode a film of this size with: H.264, which everything shows, else VP9.
 *
 * Asked with the true frame rate first, and then without any: some encoders of phones agree only to rates they can keep up
 * with live, which nobody asks of them here.
 */
export async function findEncoder({ widthPx, heightPx }: PictureSize, framesPerSecond: number, bitsPerSecond: number): Promise<ClipEncoder | undefined> {
  for (const codec of CODECS) {
    for (const rate of [framesPerSecond, undefined]) {
      if (await isEncodable(codec, { width: widthPx, height: heightPx, quality: new Quality({ bitrate: bitsPerSecond }), frameRate: rate }))
        return { codec, framesPerSecond: rate }
    }
  }
  return undefined
}

/** Some browsers throw where they should answer no. */
async function isEncodable(...asked: Parameters<typeof canEncodeVideo>): Promise<boolean> {
  try {
    return await canEncodeVideo(...asked)
  }
  catch {
    return false
  }
}
