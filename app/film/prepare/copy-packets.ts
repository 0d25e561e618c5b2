import { EncodedPacketSink, EncodedVideoPacketSource, Output } from 'mediabunny'
import type { EncodedPacket, VideoCodec } from 'mediabunny'
import type { PacketRun } from './packet-run'
import type { PreparedFile } from './prepared-file'
import type { ReadClip } from './read-clip'
import type { Watch } from './worker-message'

/** What the file called a key frame needs others: it cannot stand first. */
export class NotAKeyFrame extends Error {}

export interface CopiedRun extends PacketRun {
  /** Where a frame of the old file is shown in the new one, in seconds; negative for what is hidden before the first. */
  newTimeS(tick: number): number
}

/**
 * Copies packets as they are into a film that holds nothing else: no sound, no tags.
 *
 * @param keepsTurn whether the film is to be shown turned as the original was
 * @throws NotAKeyFrame when a run does not begin with one
 */
export async function copyPackets(clip: ReadClip, runs: readonly CopiedRun[], into: PreparedFile, watch: Watch): Promise<void> {
  const source = new EncodedVideoPacketSource(await getCodec(clip))
  const total = runs.reduce((sum, { from, to }) => sum + to - from, 0)
  const output = new Output({ format: into.format, target: into.target })
  output.addVideoTrack(source, { maximumPacketCount: total, rotation: await clip.track.getRotation(), flip: await clip.track.getFlip() })
  await output.start()
  try {
    const meta = { decoderConfig: await clip.track.getDecoderConfig() ?? undefined }
    let done = 0
    for (const run of runs) {
      for await (const packet of packetsOf(clip, run)) {
        const tick = Math.round(packet.timestamp * clip.facts.timeBase)
        await source.add(packet.clone({ timestamp: run.newTimeS(tick) }), meta)
        watch.onProgress({ done: ++done, total })
        watch.signal.throwIfAborted()
      }
    }
    await output.finalize()
  }
  catch (error) {
    await output.cancel()
    throw error
  }
}

async function getCodec({ track }: ReadClip): Promise<VideoCodec> {
  const codec = await track.getCodec()
  if (codec === null) throw new Error('A codec without a name cannot be copied.')
  return codec
}

async function* packetsOf(clip: ReadClip, run: PacketRun): AsyncGenerator<EncodedPacket> {
  const first = clip.packets[run.from]
  const sink = new EncodedPacketSink(clip.track)
  // Looked at in its bytes: some phones mark frames as key frames that lean on earlier ones.
  const start = first ? await sink.getKeyPacket(first.tick / clip.facts.timeBase, { verifyKeyPackets: true }) : null
  if (!first || !start || Math.round(start.timestamp * clip.facts.timeBase) !== first.tick)
    throw new NotAKeyFrame('The film does not begin with a key frame there.')
  let left = run.to - run.from
  for await (const packet of sink.packets(start, undefined, { verifyKeyPackets: true })) {
    yield packet
    left -= 1
    if (left === 0) return
  }
  throw new Error('The film ended before its own index.')
}
