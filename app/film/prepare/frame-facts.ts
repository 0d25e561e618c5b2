import { lumaOf, meanLuma } from './luma'
import type { OpenedClip } from './open-clip'

/** What the pictures themselves say, for advice on filming. */
export interface FrameFacts {
  /** 0 (black) to 1, over a few frames; undefined where this browser cannot decode the clip. */
  meanBrightness: number | undefined
  /** Taller than wide, as a golfer is. */
  isUpright: boolean
}

/** Away from both ends, where a hand is before the lens. */
const LOOKED_AT = [0.2, 0.5, 0.8]
const SIDE_PX = 48

/** Looks at three frames of a clip. */
export async function readFrameFacts({ facts, picker }: Pick<OpenedClip, 'facts' | 'picker'>): Promise<FrameFacts> {
  const isUpright = facts.heightPx > facts.widthPx
  if (!facts.canDecode) return { meanBrightness: undefined, isUpright }
  const found: number[] = []
  for (const share of LOOKED_AT) {
    const picture = await picker.pick(Math.floor(share * (facts.frameCount - 1))).catch(() => undefined)
    if (picture) found.push(brightnessOf(picture))
  }
  return { meanBrightness: found.length === 0 ? undefined : found.reduce((sum, value) => sum + value, 0) / found.length, isUpright }
}

function brightnessOf(picture: ImageBitmap): number {
  const context = new OffscreenCanvas(SIDE_PX, SIDE_PX).getContext('2d', { willReadFrequently: true })
  if (!context) throw new Error('This browser draws nothing here.')
  context.drawImage(picture, 0, 0, SIDE_PX, SIDE_PX)
  return meanLuma(lumaOf(context.getImageData(0, 0, SIDE_PX, SIDE_PX).data))
}
