import type { VideoEncodingConfig, VideoSample } from 'mediabunny'
import { Output, Quality, VideoSampleSink, VideoSampleSource } from 'mediabunny'
import { bitsPerSecondFor } from './bit-rate'
import type { ClipEncoder, ClipFacts } from './clip-facts'
import type { KeepPlan, KeptFrame } from './keep-plan'
import { lengthOf } from './keep-plan'
import { preparedSize } from './picture-size'
import type { PreparedFile } from './prepared-file'
import type { ReadClip } from './read-clip'
import type { Watch } from './worker-message'

/** Half of the least distance between two frames at 1000 a second; decoders count whole microseconds. */
const SAME_MOMENT_S = 0.0005

/** A decoder left frames out, or an encoder did: the film would not be the one that was filmed. */
export class FramesLost extends Error {}

export interface ReEncoding {
  clip: ReadClip
  plan: KeepPlan
  encoder: ClipEncoder
  hardware: 'no-preference' | 'prefer-software'
}

/**
 * Decodes the kept frames and encodes each of them again at its own time, upright and not larger than it may be.
 *
 * One frame at a time is held here, and those that decoder (at most 40 ahead) and encoder hold themselves.
 *
 * @throws FramesLost when not every kept frame came out; whatever decoder and encoder throw; the signal's reason
 */
export async function reEncode({ clip, plan, encoder, hardware }: ReEncoding, into: PreparedFile, watch: Watch): Promise<void> {
  let encodedCount = 0
  const source = new VideoSampleSource({
    ...encodingFor(clip.facts, plan, encoder),
    hardwareAcceleration: hardware,
    onEncodedPacket: () => { encodedCount += 1 },
  })
  const output = new Output({ format: into.format, target: into.target })
  output.addVideoTrack(source, { maximumPacketCount: plan.frames.length })
  await output.start()
  try {
    let done = 0
    for await (const { sample, frame } of keptSamples(clip, plan, hardware)) {
      await addFrame(source, sample, frame)
      watch.onProgress({ done: ++done, total: plan.frames.length })
      watch.signal.throwIfAborted()
    }
    await output.finalize()
  }
  catch (error) {
    await output.cancel()
    throw error
  }
  if (encodedCount !== plan.frames.length) throw new FramesLost(`${encodedCount} of ${plan.frames.length} frames came out of the encoder.`)
}

async function addFrame(source: VideoSampleSource, sample: VideoSample, frame: KeptFrame): Promise<void> {
  try {
    sample.setTimestamp(frame.newS)
    sample.setDuration(frame.lengthS)
    await source.add(sample, { keyFrame: frame.isKey })
  }
  finally {
    sample.close()
  }
}

/** The decoded picture of each kept frame, in order; whoever takes one closes it. */
async function* keptSamples({ track, facts }: ReadClip, plan: KeepPlan, hardware: ReEncoding['hardware']): AsyncGenerator<{ sample: VideoSample, frame: KeptFrame }> {
  const sink = new VideoSampleSink(track, { hardwareAcceleration: hardware })
  let next = 0
  for (const { fromFrame, toFrame } of plan.spans) {
    const end = next + toFrame - fromFrame
    for await (const sample of sink.samples(plan.frames[next]?.oldS, endAfter(facts, toFrame))) {
      const frame = plan.frames[next]
      if (next >= end || !frame || sample.timestamp < frame.oldS - SAME_MOMENT_S) {
        sample.close()
        continue
      }
      if (sample.timestamp > frame.oldS + SAME_MOMENT_S) {
        sample.close()
        throw new FramesLost(`No frame came out of the decoder for ${frame.oldS} s.`)
      }
      next += 1
      yield { sample, frame }
    }
    if (next < end) throw new FramesLost(`${end - next} frames did not come out of the decoder.`)
  }
}

/** A moment after the last frame of a span and before the next; past the last frame, frames may follow that are not shown. */
function endAfter({ frameTimesS }: ClipFacts, toFrame: number): number {
  return (frameTimesS[toFrame - 1] ?? 0) + SAME_MOMENT_S
}

function encodingFor(facts: ClipFacts, plan: KeepPlan, encoder: ClipEncoder): VideoEncodingConfig {
  const size = preparedSize(facts)
  const durationS = facts.durationMs / 1000
  const bitrate = bitsPerSecondFor({ ...size, framesPerSecond: facts.framesPerSecond, durationS: lengthOf(plan) }, { bytes: facts.bytes, durationS })
  return {
    codec: encoder.codec,
    quality: new Quality({ bitrate, bitrateMode: 'variable' }),
    // The other mode may drop frames to keep up.
    latencyMode: 'quality',
    transform: needsRedrawing(facts) ? { width: size.widthPx, height: size.heightPx, fit: 'fill' } : undefined,
    // Not given as the track's rate: that would move every frame onto its grid.
    onEncoderConfig: (config) => { config.framerate = encoder.framesPerSecond },
  }
}

/** Whether the stored picture is another than the one that is sent; otherwise frames go from decoder to encoder as they are. */
function needsRedrawing(facts: ClipFacts): boolean {
  const { widthPx, heightPx } = preparedSize(facts)
  return facts.rotationDeg !== 0 || facts.isMirrored || !facts.hasSquarePixels
    || widthPx !== facts.widthPx || heightPx !== facts.heightPx
    || facts.isHighDynamicRange || !isEightBit(facts)
}

/** Encoders take eight bits a colour; drawing brings the others down to them. VP9 and AV1 say their depth in their fourth part. */
function isEightBit({ codec, codecString }: ClipFacts): boolean {
  if (codec === 'avc') return /^avc[13]\.(?:42|4d|58|64)/i.test(codecString)
  if (codec === 'vp9' || codec === 'av1') return codecString.split('.')[3] === '08'
  return codec === 'vp8'
}
