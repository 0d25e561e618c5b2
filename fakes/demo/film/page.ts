import { BlobSource, BufferTarget, CanvasSink, CanvasSource, Input, MP4, Mp4OutputFormat, Output, Quality } from 'mediabunny'
import { HEIGHT_PX, WIDTH_PX } from './camera'
import { FILM_CLIPS } from './clips'
import { drawBackground, drawFrame } from './draw'
import type { DrawnMarks } from './draw-golfer'
import type { Timeline } from './timeline'
import { frameTicks, TIMESCALE, timelineOf } from './timeline'

/** What the page hands back for a clip. */
export interface RenderedClip {
  mp4Base64: string
  /** Where each mark was drawn, one entry a frame, in pixels. */
  drawn: DrawnMarks[]
  /** Frames of the file that looked more like a neighbouring drawing than their own, of those compared. */
  misplaced: number[]
}

declare global {
  /** Called by the script that drives this page. */
  var renderClip: (name: string, bitsPerSecond: number) => Promise<RenderedClip>
}

/** Ten key frames a second: a step back never waits for long. */
const KEY_FRAMES_PER_SECOND = 10

globalThis.renderClip = async (name, bitsPerSecond) => {
  const clip = FILM_CLIPS.find(each => each.name === name)
  if (!clip) throw new Error(`There is no clip ${name}.`)
  const timeline = timelineOf(clip)
  const background = blank()
  drawBackground(brushOf(background), timeline)
  const { bytes, drawn } = await encode(timeline, background, bitsPerSecond)
  return { mp4Base64: base64(bytes), drawn, misplaced: await findMisplaced(timeline, background, bytes) }
}

async function encode(timeline: Timeline, background: HTMLCanvasElement, bitsPerSecond: number): Promise<{ bytes: ArrayBuffer, drawn: DrawnMarks[] }> {
  const canvas = blank()
  const brush = brushOf(canvas)
  const output = new Output({ format: new Mp4OutputFormat({ fastStart: 'in-memory' }), target: new BufferTarget() })
  const quality = new Quality({ bitrate: bitsPerSecond, bitrateMode: 'variable' })
  const source = new CanvasSource(canvas, { codec: 'avc', quality, keyFrameInterval: 1 / KEY_FRAMES_PER_SECOND, latencyMode: 'quality' })
  output.addVideoTrack(source)
  await output.start()
  const drawn: DrawnMarks[] = []
  const step = timeline.clip.framesPerSecond / KEY_FRAMES_PER_SECOND
  for (let index = 0; index < timeline.frameCount; index++) {
    brush.drawImage(background, 0, 0)
    drawn.push(drawFrame(brush, timeline, secondsOf(timeline, index)))
    await source.add(secondsOf(timeline, index), 1 / timeline.clip.framesPerSecond, { keyFrame: index % step === 0 })
  }
  await output.finalize()
  if (!output.target.buffer) throw new Error('The encoder wrote nothing.')
  return { bytes: output.target.buffer, drawn }
}

/** Frames around impact, where neighbours differ most, must look like their own drawing and not like the one before or after. */
async function findMisplaced(timeline: Timeline, background: HTMLCanvasElement, bytes: ArrayBuffer): Promise<number[]> {
  const input = new Input({ source: new BlobSource(new Blob([bytes])), formats: [MP4] })
  const track = await input.getPrimaryVideoTrack()
  if (!track) throw new Error('The file holds no picture.')
  const sink = new CanvasSink(track)
  const misplaced: number[] = []
  for (const index of timeline.swings.flatMap(({ impactS }) => around(Math.floor(impactS * timeline.clip.framesPerSecond)))) {
    const shown = await sink.getCanvas(secondsOf(timeline, index) + 1e-4)
    if (!shown) throw new Error(`The file has no frame ${index}.`)
    const [own, before, after] = [0, -1, 1].map(offset => difference(shown.canvas, timeline, background, index + offset))
    if (own === undefined || before === undefined || after === undefined || own >= before || own >= after) misplaced.push(index)
  }
  return misplaced
}

function around(index: number): number[] {
  return [-6, -3, 0, 1, 4, 7].map(offset => index + offset)
}

/** Mean difference of the pictures' brightness, 0 to 255. */
function difference(shown: HTMLCanvasElement | OffscreenCanvas, timeline: Timeline, background: HTMLCanvasElement, index: number): number {
  const canvas = blank()
  brushOf(canvas).drawImage(background, 0, 0)
  drawFrame(brushOf(canvas), timeline, secondsOf(timeline, index))
  const copy = blank()
  brushOf(copy).drawImage(shown, 0, 0)
  const [a, b] = [pixels(copy), pixels(canvas)]
  let sum = 0
  for (let at = 0; at < a.length; at += 4) sum += Math.abs((a[at + 1] ?? 0) - (b[at + 1] ?? 0))
  return sum / (WIDTH_PX * HEIGHT_PX)
}

function pixels(canvas: HTMLCanvasElement): Uint8ClampedArray {
  return brushOf(canvas).getImageData(0, 0, WIDTH_PX, HEIGHT_PX).data
}

function secondsOf(timeline: Timeline, index: number): number {
  return frameTicks(timeline.clip, index) / TIMESCALE
}

function blank(): HTMLCanvasElement {
  const canvas = document.createElement('canvas')
  canvas.width = WIDTH_PX
  canvas.height = HEIGHT_PX
  return canvas
}

function brushOf(canvas: HTMLCanvasElement): CanvasRenderingContext2D {
  const brush = canvas.getContext('2d', { willReadFrequently: true })
  if (!brush) throw new Error('This browser cannot draw.')
  return brush
}

function base64(bytes: ArrayBuffer): string {
  const view = new Uint8Array(bytes)
  let text = ''
  const slice = 0x8000
  for (let at = 0; at < view.length; at += slice) text += String.fromCharCode(...view.subarray(at, at + slice))
  return btoa(text)
}
