import { BufferSource, EncodedPacketSink, Input, MP4 } from 'mediabunny'

export interface OutputPacket {
  timeS: number
  isKey: boolean
}

/** A film as it stands in its file, read here in Node rather than by what wrote it in the page. */
export async function readOutput(bytes: Uint8Array<ArrayBuffer>) {
  const input = new Input({ source: new BufferSource(bytes), formats: [MP4] })
  const track = await input.getPrimaryVideoTrack()
  if (!track) throw new Error('The film has no picture.')
  const packets: OutputPacket[] = []
  for await (const packet of new EncodedPacketSink(track).packets(undefined, undefined, { verifyKeyPackets: true }))
    packets.push({ timeS: packet.timestamp, isKey: packet.type === 'key' })
  packets.sort((a, b) => a.timeS - b.timeS)
  return {
    packets,
    timesS: packets.map(packet => packet.timeS),
    keysS: packets.filter(packet => packet.isKey).map(packet => packet.timeS),
    endS: await input.computeDuration(),
    codec: await track.getCodec(),
    codecString: await track.getCodecParameterString(),
    rotationDeg: await track.getRotation(),
    size: [await track.getDisplayWidth(), await track.getDisplayHeight()],
    timeBase: await track.getTimeResolution(),
    trackCount: (await input.getTracks()).length,
    tags: Object.keys(await input.getMetadataTags()).filter(key => key !== 'raw'),
    rawTags: Object.keys((await input.getMetadataTags()).raw ?? {}),
    boxes: topLevelBoxes(bytes),
  }
}

/** Names of the boxes of the file in their order (ISO/IEC 14496-12, 4.2). */
function topLevelBoxes(bytes: Uint8Array<ArrayBuffer>): string[] {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  const names: string[] = []
  for (let at = 0; at + 8 <= view.byteLength;) {
    const short = view.getUint32(at)
    names.push(String.fromCharCode(...bytes.subarray(at + 4, at + 8)))
    at += short === 1 ? Number(view.getBigUint64(at + 8)) : short
    if (short === 0) break
  }
  return names
}

/** The longest way between neighbouring key frames, and from the last one to the end. */
export function longestKeyGapS({ keysS, endS }: { keysS: number[], endS: number }): number {
  return [...keysS, endS].slice(1).reduce((longest, timeS, index) => Math.max(longest, timeS - (keysS[index] ?? 0)), 0)
}
