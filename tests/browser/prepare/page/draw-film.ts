import { BufferTarget, CanvasSource, Mp4OutputFormat, Output, Quality } from 'mediabunny'

const FRAMES_PER_SECOND = 30

/** A film of a bar that moves, of a size that no film of the tests has. */
export async function drawFilm(widthPx: number, heightPx: number, frameCount: number): Promise<File> {
  const canvas = new OffscreenCanvas(widthPx, heightPx)
  const context = canvas.getContext('2d')
  const target = new BufferTarget()
  const output = new Output({ format: new Mp4OutputFormat(), target })
  const source = new CanvasSource(canvas, { codec: 'avc', quality: new Quality({ bitrate: 2_000_000 }) })
  output.addVideoTrack(source)
  await output.start()
  for (let frame = 0; frame < frameCount; frame++) {
    if (context) {
      context.fillStyle = '#335'
      context.fillRect(0, 0, widthPx, heightPx)
      context.fillStyle = '#dd9'
      context.fillRect(frame * 40, 0, 80, heightPx)
    }
    await source.add(frame / FRAMES_PER_SECOND, 1 / FRAMES_PER_SECOND)
  }
  await output.finalize()
  if (!target.buffer) throw new Error('No film was made.')
  return new File([target.buffer], 'drawn.mp4')
}
