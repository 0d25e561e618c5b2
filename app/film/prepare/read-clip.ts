import type { InputFormat, InputVideoTrack } from 'mediabunny'
import { BlobSource, EncodedPacketSink, Input, Logging, LogLevel, MP4, QTFF, WEBM } from 'mediabunny'
import { medianFramesPerSecond } from '#shared/domain/film/frame-rate'
import { FILM_MAX_FRAME_COUNT } from '#shared/domain/film/limits'
import type { FilmCodec, FilmContainer } from '#shared/domain/film/reading'
import { bitsPerSecondFor } from './bit-rate'
import type { ClipFacts } from './clip-facts'
import { ClipProblem } from './clip-problem'
import { findEncoder } from './find-encoder'
import type { PacketTime } from './packet-run'
import { listShownFrames, longestKeyGapTicks } from './packet-run'
import { preparedSize } from './picture-size'
import type { BoxSurvey } from './survey-boxes'
import { surveyBoxes } from './survey-boxes'
import { tellsDevice, tellsLocation } from './telling-names'

const CAPTURE_RATE_TAG = 'com.android.capture.fps'

/** A clip opened for reading; `input` must be disposed of. */
export interface ReadClip {
  input: Input
  track: InputVideoTrack
  facts: ClipFacts
  /** All packets of the picture in decode order, shown or not. */
  packets: PacketTime[]
}

/**
 * Reads what a clip says of itself and asks this browser what it can do with it; decodes nothing. The same in the page and
 * in the worker.
 *
 * @throws ClipProblem for what is no film, cannot be read, or holds fewer than two frames
 */
export async function readClip(file: Blob): Promise<ReadClip> {
  // The library's warnings are for those who wrote the film; what they mean for this person is said in words of ours.
  Logging.level = LogLevel.Silent
  const input = new Input({ formats: [MP4, QTFF, WEBM], source: new BlobSource(file) })
  try {
    const { format, track } = await openPicture(input)
    return { input, track, ...await readFacts({ file, input, format, track }) }
  }
  catch (error) {
    input.dispose()
    throw error instanceof ClipProblem ? error : new ClipProblem('unreadable', error instanceof Error ? error.message : String(error))
  }
}

async function openPicture(input: Input): Promise<{ format: InputFormat, track: InputVideoTrack }> {
  if (!await input.canRead()) throw new ClipProblem('not-video', 'no known header')
  const [track] = await input.getVideoTracks()
  if (!track) throw new ClipProblem('not-video', 'no picture track')
  return { format: await input.getFormat(), track }
}

interface Opened {
  file: Blob
  input: Input
  format: InputFormat
  track: InputVideoTrack
}

async function readFacts({ file, input, format, track }: Opened): Promise<Pick<ReadClip, 'facts' | 'packets'>> {
  const timeBase = await track.getTimeResolution()
  const packets = await readPackets(track, timeBase)
  const survey = format === WEBM ? await surveyTags(input) : await surveyBoxes(file)
  const { frameTicks, lengthTicks } = listShownFrames(packets, survey.shown)
  if (frameTicks.length < 2) throw new ClipProblem('no-frames')
  const framesPerSecond = medianFramesPerSecond(frameTicks, timeBase)
  const size = { widthPx: await track.getDisplayWidth(), heightPx: await track.getDisplayHeight() }
  const durationS = lengthTicks / timeBase
  const bitsPerSecond = bitsPerSecondFor({ ...preparedSize(size), framesPerSecond, durationS }, { bytes: file.size, durationS })
  const facts: ClipFacts = {
    container: containerOf(format),
    bytes: file.size,
    ...await readCodec(track),
    ...size,
    ...await readShape(track),
    durationMs: Math.round(durationS * 1000),
    frameCount: frameTicks.length,
    framesPerSecond,
    timeBase,
    frameTicks,
    frameTimesS: frameTicks.map(tick => tick / timeBase),
    longestKeyGapS: longestKeyGapTicks(packets, frameTicks, lengthTicks) / timeBase,
    captureFramesPerSecond: format === WEBM ? undefined : await findCaptureRate(input),
    hasSound: survey.hasSound || (await input.getAudioTracks()).length > 0,
    hasLocation: survey.hasLocation,
    deviceTags: survey.deviceTags,
    canDecode: await isDecodable(track),
    encoder: await findEncoder(preparedSize(size), framesPerSecond, bitsPerSecond),
  }
  return { facts, packets }
}

async function readPackets(track: InputVideoTrack, timeBase: number): Promise<PacketTime[]> {
  const packets: PacketTime[] = []
  for await (const packet of new EncodedPacketSink(track).packets(undefined, undefined, { metadataOnly: true })) {
    if (packets.length >= FILM_MAX_FRAME_COUNT) throw new ClipProblem('unreadable', 'more frames than a film can have')
    packets.push({
      tick: Math.round(packet.timestamp * timeBase),
      lengthTicks: Math.round(packet.duration * timeBase),
      isKey: packet.type === 'key',
      bytes: packet.byteLength,
    })
  }
  return packets
}

async function readCodec(track: InputVideoTrack): Promise<{ codec: FilmCodec, codecString: string }> {
  const codec = await track.getCodec()
  return codec === null
    ? { codec: 'unknown', codecString: String(await track.getInternalCodecId() ?? '') }
    : { codec, codecString: await track.getCodecParameterString() ?? '' }
}

async function readShape(track: InputVideoTrack) {
  const pixel = await track.getPixelAspectRatio()
  return {
    rotationDeg: await track.getRotation(),
    isMirrored: await track.getFlip(),
    hasSquarePixels: pixel.num === pixel.den,
    isHighDynamicRange: await track.hasHighDynamicRange(),
  }
}

function containerOf(format: InputFormat): FilmContainer {
  return format === QTFF ? 'mov' : format === WEBM ? 'webm' : 'mp4'
}

async function surveyTags(input: Input): Promise<BoxSurvey> {
  const names = Object.keys((await input.getMetadataTags()).raw ?? {})
  return { hasSound: false, hasLocation: names.some(tellsLocation), deviceTags: names.filter(tellsDevice).sort(), shown: undefined }
}

/** Some phones throw where they should answer no. */
async function isDecodable(track: InputVideoTrack): Promise<boolean> {
  try {
    return await track.canDecode()
  }
  catch {
    return false
  }
}

/** A 32-bit float in QuickTime metadata, as Android writes it. */
async function findCaptureRate(input: Input): Promise<number | undefined> {
  const value = (await input.getMetadataTags()).raw?.[CAPTURE_RATE_TAG]
  if (!(value instanceof Uint8Array) || value.byteLength !== 4) return undefined
  const rate = new DataView(value.buffer, value.byteOffset, 4).getFloat32(0)
  return Number.isFinite(rate) && rate > 0 ? rate : undefined
}
