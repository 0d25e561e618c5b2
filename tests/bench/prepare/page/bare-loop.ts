import { BlobSource, EncodedPacketSink, Input, MP4 } from 'mediabunny'
import type { OpenedClip, SpanS } from '~/film/prepare'
import { bitsPerSecondFor } from '~/film/prepare/bit-rate'
import { lengthOf, planKeep } from '~/film/prepare/keep-plan'

/** All that the loop needs, in memory before the clock starts. */
export interface BareFilm {
  chunks: EncodedVideoChunk[]
  decoder: VideoDecoderConfig
  encoder: VideoEncoderConfig
  /** By microsecond: whether the frame becomes a key frame. Frames that are not here are decoded and thrown away. */
  keys: Map<number, boolean>
}

const DECODING_MAX = 8
const ENCODING_MAX = 4

/** The same packets, bits and key frames as preparing takes. */
export async function readBareFilm(file: File, { facts }: OpenedClip, keep: SpanS[], codec: string): Promise<BareFilm> {
  const plan = planKeep(facts.frameTimesS, keep, facts.durationMs / 1000)
  const input = new Input({ source: new BlobSource(file), formats: [MP4] })
  const track = await input.getPrimaryVideoTrack()
  const decoder = await track?.getDecoderConfig()
  if (!track || !decoder) throw new Error('The clip cannot be read.')
  const sink = new EncodedPacketSink(track)
  const isKeyAt = new Map(plan.frames.map(frame => [Math.round(frame.oldS * facts.timeBase), frame.isKey]))
  const chunks: EncodedVideoChunk[] = []
  const keys = new Map<number, boolean>()
  for (const { oldS: [firstS, lastS] } of plan.spans) {
    const start = await sink.getKeyPacket(firstS) ?? undefined
    for await (const packet of sink.packets(start)) {
      chunks.push(packet.toEncodedVideoChunk())
      const isKey = isKeyAt.get(Math.round(packet.timestamp * facts.timeBase))
      if (isKey !== undefined) keys.set(packet.microsecondTimestamp, isKey)
      // In the demo's clips every frame leans on earlier ones alone.
      if (packet.timestamp >= lastS) break
    }
  }
  input.dispose()
  const { widthPx, heightPx, framesPerSecond } = facts
  const bitrate = bitsPerSecondFor({ widthPx, heightPx, framesPerSecond, durationS: lengthOf(plan) }, { bytes: facts.bytes, durationS: facts.durationMs / 1000 })
  return {
    chunks,
    decoder,
    encoder: { codec, width: widthPx, height: heightPx, bitrate, bitrateMode: 'variable', latencyMode: 'quality', framerate: framesPerSecond, avc: { format: 'avc' } },
    keys,
  }
}

/** Decodes and encodes with nothing around it: no file, no worker, no times of its own. @returns frames encoded */
export async function bareLoop({ chunks, decoder: decoding, encoder: encoding, keys }: BareFilm): Promise<number> {
  let encoded = 0
  let failure: DOMException | undefined
  const onError = (error: DOMException) => { failure = error }
  const encoder = new VideoEncoder({ output: () => { encoded += 1 }, error: onError })
  encoder.configure(encoding)
  const decoder = new VideoDecoder({
    output: (frame) => {
      const keyFrame = keys.get(frame.timestamp)
      if (keyFrame !== undefined && encoder.state === 'configured') encoder.encode(frame, { keyFrame })
      frame.close()
    },
    error: onError,
  })
  decoder.configure(decoding)
  for (const chunk of chunks) {
    while (decoder.decodeQueueSize > DECODING_MAX) await dequeued(decoder)
    while (encoder.encodeQueueSize > ENCODING_MAX) await dequeued(encoder)
    if (failure) throw failure
    decoder.decode(chunk)
  }
  await decoder.flush()
  await encoder.flush()
  decoder.close()
  encoder.close()
  return encoded
}

function dequeued(codec: EventTarget): Promise<Event> {
  return new Promise(resolve => codec.addEventListener('dequeue', resolve, { once: true }))
}
