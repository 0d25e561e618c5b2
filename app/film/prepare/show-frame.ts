import type { OpenedClip } from './open-clip'

/** What each canvas was last asked to show: an answer that comes late must not replace a newer one. */
const lastAsked = new WeakMap<HTMLCanvasElement, symbol>()

/**
 * Draws the frame on show at a time, upright; the canvas takes the picture's size (at most 720 px on the longer side).
 * Asked again before it is done, it skips what is no longer wanted, so it may be called for every move of a slider.
 *
 * @param timeS in seconds as the clip plays; before the first frame shows the first, after the last the last
 * @returns the time of the frame drawn; undefined when a newer request overtook this one, or the frame cannot be decoded
 */
export async function showFrame({ facts, picker }: Pick<OpenedClip, 'facts' | 'picker'>, timeS: number, canvas: HTMLCanvasElement): Promise<number | undefined> {
  const asked = Symbol()
  lastAsked.set(canvas, asked)
  if (!facts.canDecode) return undefined
  const frame = picker.frameAt(timeS)
  const picture = await picker.pick(frame, () => lastAsked.get(canvas) === asked)
  if (!picture || lastAsked.get(canvas) !== asked) return undefined
  canvas.width = picker.widthPx
  canvas.height = picker.heightPx
  canvas.getContext('2d')?.drawImage(picture, 0, 0)
  return facts.frameTimesS[frame]
}
