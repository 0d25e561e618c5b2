import { BlobSource, EncodedPacketSink, Input, MP4 } from 'mediabunny'
import type { PreparedClip } from '~/film/prepare'

/** Whether the frames of a cut film are, byte for byte, those of the film it was cut from. */
export async function holdsSamePackets(before: Blob, after: Blob, spans: PreparedClip['spans']): Promise<boolean> {
  const old = await packetsByTime(before)
  const now = await packetsByTime(after)
  const kept = spans.flatMap(({ fromFrame, toFrame }) => old.slice(fromFrame, toFrame))
  return kept.length === now.length && kept.every((bytes, index) => isSame(bytes, now[index]))
}

async function packetsByTime(file: Blob): Promise<Uint8Array[]> {
  const input = new Input({ source: new BlobSource(file), formats: [MP4] })
  const track = await input.getPrimaryVideoTrack()
  const packets: { timeS: number, bytes: Uint8Array }[] = []
  if (track) for await (const packet of new EncodedPacketSink(track).packets()) packets.push({ timeS: packet.timestamp, bytes: packet.data })
  input.dispose()
  return packets.sort((a, b) => a.timeS - b.timeS).map(({ bytes }) => bytes)
}

function isSame(a: Uint8Array, b: Uint8Array | undefined): boolean {
  return a.length === b?.length && a.every((value, at) => value === b[at])
}
