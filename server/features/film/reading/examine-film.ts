import type { FilmCodec, FilmContainer, FilmFacts, FilmReading } from '#shared/domain/film/reading'
import type { InputVideoTrack } from 'mediabunny'
import type { RangeReader } from './range-reader'
import type { FilmSurvey } from './survey'
import { CustomSource, EncodedPacketSink, Input, MP4, QTFF, WEBM } from 'mediabunny'
import { medianFramesPerSecond } from '#shared/domain/film/frame-rate'
import { judgeFilm } from '#shared/domain/film/judge'
import { FILM_MAX_FRAME_COUNT } from '#shared/domain/film/limits'
import { surveyMp4 } from './mp4-survey'
import { readType } from './mp4-boxes'
import { UnsoundFilm } from './reading.errors'
import { surveyWebm } from './webm-survey'

const EBML_MAGIC = 0x1A45DFA3
/** What an MP4 or MOV may begin with; old cameras write no `ftyp`. */
const FIRST_BOXES = ['ftyp', 'moov', 'mdat', 'wide', 'free', 'skip']
const CAPTURE_RATE_TAG = 'com.android.capture.fps'

/**
 * Reads what a film says of itself and judges it.
 *
 * Goes over the file's structure first, since the parser trusts the counts it finds. Throws `UnsoundFilm` for a film that
 * breaks a rule, `StoreUnreachable` when bytes do not come, and whatever the parser throws.
 */
export async function examineFilm(reader: RangeReader): Promise<FilmReading> {
  const survey = await surveyFilm(reader)
  const input = new Input({
    formats: [MP4, QTFF, WEBM],
    source: new CustomSource({
      getSize: () => reader.bytes,
      read: (start, end) => reader.read(start, end),
      // The reader remembers its faults; without this they would also end the worker.
      handleUnhandledError: () => {},
    }),
  })
  try {
    const film = await gatherFacts(input, reader.bytes, survey)
    const reason = judgeFilm(film)
    return reason ? { kind: 'refused', reason, detail: describe(film) } : { kind: 'accepted', film }
  }
  finally {
    input.dispose()
  }
}

async function surveyFilm(reader: RangeReader): Promise<FilmSurvey> {
  if (reader.bytes < 16)
    throw new UnsoundFilm('not-video', 'no header')
  const head = await reader.read(0, 8)
  const view = new DataView(head.buffer)
  if (view.getUint32(0) === EBML_MAGIC)
    return surveyWebm(reader)
  if (FIRST_BOXES.includes(readType(view, 4)))
    return surveyMp4(reader)
  throw new UnsoundFilm('not-video', 'no known header')
}

async function gatherFacts(input: Input, bytes: number, { traces, shown }: FilmSurvey): Promise<FilmFacts> {
  const [track] = await input.getVideoTracks()
  if (!track)
    throw new UnsoundFilm('not-video', 'no picture track')
  const timeBase = await track.getTimeResolution()
  const { frameTicks, lengthTicks } = await readFrameTicks(track, timeBase, shown)
  const codec = await findCodec(track)
  return {
    container: await findContainer(input),
    bytes,
    ...codec,
    widthPx: await track.getDisplayWidth(),
    heightPx: await track.getDisplayHeight(),
    rotationDeg: await track.getRotation(),
    durationMs: Math.round(lengthTicks / timeBase * 1000),
    frameCount: frameTicks.length,
    framesPerSecond: medianFramesPerSecond(frameTicks, timeBase),
    timeBase,
    frameTicks,
    captureFramesPerSecond: await findCaptureRate(input),
    hasSound: traces.hasSound || (await input.getAudioTracks()).length > 0,
    hasLocation: traces.hasLocation,
    deviceTags: traces.deviceTags,
  }
}

/**
 * Times of all frames shown, in ticks. Two frames at one instant count once: only one of them is ever seen.
 */
async function readFrameTicks(track: InputVideoTrack, timeBase: number, shown: FilmSurvey['shown']) {
  const ticks = new Set<number>()
  const window = shown ?? { startTick: -Infinity, endTick: Infinity }
  let endTick: number | undefined
  let readCount = 0
  for await (const packet of new EncodedPacketSink(track).packets(undefined, undefined, { metadataOnly: true })) {
    const tick = Math.round(packet.timestamp * timeBase)
    if (!Number.isSafeInteger(tick))
      throw new UnsoundFilm('unreadable', 'frame times are out of range')
    if (++readCount > FILM_MAX_FRAME_COUNT)
      throw new UnsoundFilm('unreadable', 'more frames than a film can have')
    if (tick < window.startTick || tick >= window.endTick)
      continue
    ticks.add(tick)
    endTick = Math.max(endTick ?? tick, Math.min(window.endTick, tick + Math.round(packet.duration * timeBase)))
  }
  const frameTicks = [...ticks].sort((a, b) => a - b)
  return { frameTicks, lengthTicks: (endTick ?? 0) - (frameTicks[0] ?? 0) }
}

async function findCodec(track: InputVideoTrack): Promise<{ codec: FilmCodec, codecString: string }> {
  const codec = await track.getCodec()
  if (codec === null)
    return { codec: 'unknown', codecString: printable(String(await track.getInternalCodecId() ?? '')) }
  return { codec, codecString: await track.getCodecParameterString() ?? '' }
}

async function findContainer(input: Input): Promise<FilmContainer> {
  const format = await input.getFormat()
  if (format === QTFF)
    return 'mov'
  return format === WEBM ? 'webm' : 'mp4'
}

/** Four letters in a sound file; anything at all in another, and it is stored and logged. */
function printable(text: string): string {
  return text.slice(0, 40).replace(/[^ -~]/g, '?')
}

/** A 32-bit float in QuickTime metadata, as Android's MediaMuxer writes it; WebM has no such tag. */
async function findCaptureRate(input: Input): Promise<number | undefined> {
  if (await input.getFormat() === WEBM)
    return undefined
  const value = (await input.getMetadataTags()).raw?.[CAPTURE_RATE_TAG]
  if (!(value instanceof Uint8Array) || value.byteLength !== 4)
    return undefined
  const rate = new DataView(value.buffer, value.byteOffset, 4).getFloat32(0)
  return Number.isFinite(rate) && rate > 0 ? rate : undefined
}

/** For the log and for words like "yours has 15 frames a second". */
function describe(film: FilmFacts): string {
  const rate = Math.round(film.framesPerSecond * 100) / 100
  return `${film.codecString || film.codec}, ${rate} frames a second, ${film.durationMs} ms`
}
