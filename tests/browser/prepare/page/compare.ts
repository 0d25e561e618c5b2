import type { OpenedClip } from '~/film/prepare'

/** Neighbours that a frame could be taken for. */
const NEAR = 2
const WIDTH_PX = 96
const HEIGHT_PX = 160

/**
 * For each frame of the new film, which of its neighbours in the old film it looks most like.
 * @param originals frame of the old film for each frame of the new
 */
export async function bestOffsets(before: OpenedClip, after: OpenedClip, originals: number[]): Promise<number[]> {
  const old = new Map<number, Uint8ClampedArray>()
  const offsets: number[] = []
  for (const [index, original] of originals.entries()) {
    const now = await pixelsOf(after, index)
    const near = Array.from({ length: 2 * NEAR + 1 }, (_, at) => original - NEAR + at).filter(frame => frame >= 0 && frame < before.facts.frameCount)
    const distances: { offset: number, distance: number }[] = []
    for (const frame of near) {
      const then = old.get(frame) ?? await pixelsOf(before, frame)
      old.set(frame, then)
      distances.push({ offset: frame - original, distance: distanceOf(now, then) })
    }
    offsets.push(distances.reduce((best, each) => each.distance < best.distance ? each : best, { offset: NaN, distance: Infinity }).offset)
  }
  return offsets
}

async function pixelsOf(clip: OpenedClip, frame: number): Promise<Uint8ClampedArray> {
  const picture = await clip.picker.pick(frame)
  const context = new OffscreenCanvas(WIDTH_PX, HEIGHT_PX).getContext('2d', { willReadFrequently: true })
  if (!picture || !context) throw new Error(`Frame ${frame} cannot be seen.`)
  context.drawImage(picture, 0, 0, WIDTH_PX, HEIGHT_PX)
  return context.getImageData(0, 0, WIDTH_PX, HEIGHT_PX).data
}

function distanceOf(a: Uint8ClampedArray, b: Uint8ClampedArray): number {
  return a.reduce((sum, value, at) => sum + (value - (b[at] ?? 0)) ** 2, 0)
}
