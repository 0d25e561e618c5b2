import { VideoSampleSink } from 'mediabunny'
import type { ReadClip } from './read-clip'

/** Large enough to see a club head on a phone, small enough that two dozen take 30 MB. */
const LONGER_SIDE_PX = 720
const CACHE_MAX = 24
/** Frames kept on either side of one that was asked for: they were decoded on the way, and come next when scrubbing. */
const AROUND = 5

/** Gives single frames of a clip as small upright pictures, and remembers the last few. */
export class FramePicker {
  readonly widthPx: number
  readonly heightPx: number
  readonly #clip: ReadClip
  readonly #sink: VideoSampleSink
  /** By frame; the one used last stands last. */
  readonly #pictures = new Map<number, ImageBitmap>()
  #working: Promise<void> = Promise.resolve()
  #isClosed = false

  constructor(clip: ReadClip) {
    const scale = Math.min(1, LONGER_SIDE_PX / Math.max(clip.facts.widthPx, clip.facts.heightPx))
    this.widthPx = Math.max(1, Math.round(clip.facts.widthPx * scale))
    this.heightPx = Math.max(1, Math.round(clip.facts.heightPx * scale))
    this.#clip = clip
    this.#sink = new VideoSampleSink(clip.track)
  }

  /** The frame on show at a time: the last one that began by then, or the first. */
  frameAt(timeS: number): number {
    const times = this.#clip.facts.frameTimesS
    const after = times.findIndex(frameS => frameS > timeS + 1e-6)
    return Math.max(0, (after === -1 ? times.length : after) - 1)
  }

  /**
   * @param isWanted asked before the work begins, since requests wait for each other and a hand on a slider is quicker
   * @returns undefined when it was no longer wanted, or the decoder gave no such frame
   */
  async pick(frame: number, isWanted: () => boolean = () => true): Promise<ImageBitmap | undefined> {
    const known = this.#take(frame)
    if (known) return known
    const turn = this.#working.then(async () => {
      if (!this.#isClosed && isWanted() && !this.#pictures.has(frame)) await this.#decodeAround(frame)
    })
    // A frame that failed must not stop those after it.
    this.#working = turn.catch(() => undefined)
    await turn
    return this.#take(frame)
  }

  close(): void {
    this.#isClosed = true
    for (const picture of this.#pictures.values()) picture.close()
    this.#pictures.clear()
  }

  #take(frame: number): ImageBitmap | undefined {
    const picture = this.#pictures.get(frame)
    if (picture) {
      this.#pictures.delete(frame)
      this.#pictures.set(frame, picture)
    }
    return picture
  }

  async #decodeAround(frame: number): Promise<void> {
    const times = this.#clip.facts.frameTimesS
    const first = Math.max(0, frame - AROUND)
    const last = Math.min(times.length - 1, frame + AROUND)
    for await (const sample of this.#sink.samples(times[first], (times[last] ?? 0) + 1e-4)) {
      try {
        const at = this.frameAt(sample.timestamp)
        if (!this.#isClosed && at >= first && !this.#pictures.has(at)) this.#keep(at, draw(sample, this.widthPx, this.heightPx))
      }
      finally {
        sample.close()
      }
    }
  }

  #keep(frame: number, picture: ImageBitmap): void {
    this.#pictures.set(frame, picture)
    for (const [oldest, old] of this.#pictures) {
      if (this.#pictures.size <= CACHE_MAX) return
      this.#pictures.delete(oldest)
      old.close()
    }
  }
}

interface Drawable {
  draw(context: OffscreenCanvasRenderingContext2D, x: number, y: number, widthPx: number, heightPx: number): void
}

/** Turned upright by the draw itself. */
function draw(sample: Drawable, widthPx: number, heightPx: number): ImageBitmap {
  const canvas = new OffscreenCanvas(widthPx, heightPx)
  const context = canvas.getContext('2d')
  if (!context) throw new Error('This browser draws nothing here.')
  sample.draw(context, 0, 0, widthPx, heightPx)
  return canvas.transferToImageBitmap()
}
