import { VideoSampleSink } from 'mediabunny'
import type { ClipFacts } from './clip-facts'
import { lumaOf, meanChange } from './luma'
import type { MotionSample } from './motion-spans'
import { readClip } from './read-clip'
import { slowedByOf } from './slow-motion'
import type { Watch } from './worker-message'

/** Of real time; a downswing lasts a quarter of a second. */
const SAMPLES_PER_SECOND = 30
/** The longer side of the picture that is compared: a golfer is some 60 pixels tall, an arm two wide. */
const LONGER_SIDE_PX = 96

/**
 * How much moves from moment to moment, measured on a small grey picture.
 *
 * @returns one sample for each moment after the first; empty for a film that this browser cannot decode
 */
export async function measureMotion(file: Blob, watch: Watch): Promise<MotionSample[]> {
  const clip = await readClip(file)
  try {
    if (!clip.facts.canDecode) return []
    const times = sampleTimes(clip.facts)
    const read = makeReader(clip.facts)
    const samples: MotionSample[] = []
    let before: Uint8Array | undefined
    let done = 0
    for await (const sample of new VideoSampleSink(clip.track).samplesAtTimestamps(times)) {
      const timeS = times[done] ?? 0
      watch.onProgress({ done: ++done, total: times.length })
      watch.signal.throwIfAborted()
      if (!sample) continue
      try {
        const luma = read(context => sample.draw(context, 0, 0, context.canvas.width, context.canvas.height))
        if (before) samples.push({ timeS, amount: meanChange(before, luma) })
        before = luma
      }
      finally {
        sample.close()
      }
    }
    return samples
  }
  finally {
    clip.input.dispose()
  }
}

/** Frames at least a thirtieth of a real second apart, so that each change is over about the same time. */
function sampleTimes(facts: ClipFacts): number[] {
  const stepS = slowedByOf(facts) / SAMPLES_PER_SECOND
  return facts.frameTimesS.reduce<number[]>((times, timeS) => {
    const last = times.at(-1)
    // A quarter less, so that frames filmed at 30 a second with some unevenness are all taken.
    if (last === undefined || timeS - last >= stepS * 0.75) times.push(timeS)
    return times
  }, [])
}

function makeReader({ widthPx, heightPx }: ClipFacts) {
  const scale = LONGER_SIDE_PX / Math.max(widthPx, heightPx)
  const canvas = new OffscreenCanvas(Math.max(1, Math.round(widthPx * scale)), Math.max(1, Math.round(heightPx * scale)))
  const context = canvas.getContext('2d', { willReadFrequently: true })
  if (!context) throw new Error('This browser draws nothing here.')
  return (draw: (context: OffscreenCanvasRenderingContext2D) => void): Uint8Array => {
    draw(context)
    return lumaOf(context.getImageData(0, 0, canvas.width, canvas.height).data)
  }
}
