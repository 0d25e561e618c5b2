import type { BuiltWorker } from '#tests/support/film/worker'
import type { RangeServer } from '#tests/support/film/range-server'
import { BufferSource, BufferTarget, Conversion, Input, MP4, Mp4OutputFormat, Output, QTFF } from 'mediabunny'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readFilm } from '#server/features/film/reading/read-film'
import { addToIndex, box, latin, metadata, movie } from '#tests/support/film/boxes'
import { readMadeFilm, readTruth } from '#tests/support/film/films'
import { startRangeServer } from '#tests/support/film/range-server'
import { buildWorkerForTest } from '#tests/support/film/worker'

let store: RangeServer
let worker: BuiltWorker

beforeAll(async () => {
  store = await startRangeServer()
  worker = await buildWorkerForTest()
}, 60_000)

afterAll(async () => {
  await store.close()
  await worker.remove()
})

function read(name: string, bytes: Uint8Array = readMadeFilm(name)) {
  return readFilm({ url: store.put(name, bytes), bytes: bytes.length, workerPath: worker.path })
}

async function readAccepted(name: string, bytes?: Uint8Array) {
  const reading = await read(name, bytes)
  if (reading.kind === 'refused')
    throw new Error(`${name} was refused: ${reading.reason}, ${reading.detail}`)
  return reading.film
}

/** 30 frames a second of 96 by 160, as `make.ts` films unless it says otherwise. */
const USUAL = { container: 'mp4', codec: 'avc', widthPx: 96, heightPx: 160, rotationDeg: 0, framesPerSecond: 30 }

describe('a film that is taken', () => {
  it.each([
    ['plain-30.mp4', { durationMs: 2000 }],
    ['faststart-30.mp4', { durationMs: 2000 }],
    ['b-frames.mp4', { durationMs: 2000 }],
    ['negative-offsets.mp4', { durationMs: 1000 }],
    ['fragmented.mp4', { durationMs: 2000 }],
    ['slow-240.mp4', { durationMs: 500, framesPerSecond: 240 }],
    ['ntsc-29.97.mp4', { durationMs: 1001, framesPerSecond: 30000 / 1001 }],
    ['uneven.mov', { container: 'mov', durationMs: 2005 }],
    // Cut half a second in without decoding: the frames before are in the file, behind an edit list.
    ['edit-list.mp4', { durationMs: 1500 }],
    // ffprobe tells a turn of −90°, counter-clockwise: 90° clockwise.
    ['rotated-90.mov', { container: 'mov', durationMs: 500, widthPx: 160, heightPx: 96, rotationDeg: 90 }],
  ])('%s has the frame times that ffprobe shows, and its own facts', async (name, facts) => {
    const film = await readAccepted(name)
    const truth = readTruth(name)
    expect(film.frameTicks).toEqual(truth.ticks)
    expect(film).toMatchObject({ ...USUAL, timeBase: truth.timeBase, frameCount: truth.ticks.length, bytes: readMadeFilm(name).length, hasSound: false, hasLocation: false, deviceTags: [], captureFramesPerSecond: undefined, ...facts })
    expect(film.codecString).toMatch(/^avc1\.64/)
  })

  it.each(['vp9.webm', 'live.webm'])('%s has the frame times that ffprobe shows, in milliseconds', async (name) => {
    const film = await readAccepted(name)
    expect(film.frameTicks).toEqual(readTruth(name).ticks)
    expect(film).toMatchObject({ container: 'webm', codec: 'vp9', timeBase: 1000, frameCount: 30, widthPx: 96, heightPx: 160 })
    expect(film.framesPerSecond).toBeCloseTo(30, 0)
  })

  it('tells the rate a phone filmed at, when the film plays slowed', async () => {
    const rate = Buffer.alloc(4)
    rate.writeFloatBE(240)
    const film = await readAccepted('capture-240.mp4', addToIndex(readMadeFilm('plain-30.mp4'), metadata('com.android.capture.fps', 23, rate)))
    expect(film).toMatchObject({ captureFramesPerSecond: 240, framesPerSecond: 30 })
  })

  it('names the tags that tell the phone, and does not refuse for them', async () => {
    const film = await readAccepted('model.mp4', addToIndex(readMadeFilm('plain-30.mp4'), metadata('com.apple.quicktime.model', 1, latin('Phone 1'))))
    expect(film.deviceTags).toEqual(['com.apple.quicktime.model'])
  })

  it('reads at most a quarter of a large file, wherever its index stands', async () => {
    const padding = Buffer.alloc(8 * 1024 * 1024)
    const films = { 'padded-before': movie({}, { before: [box('free', padding)] }), 'padded-after': movie({}, { after: [box('mdat', padding)] }) }
    for (const [name, bytes] of Object.entries(films)) {
      await readAccepted(name, bytes)
      expect(store.sentBytes(name)).toBeGreaterThan(0)
      expect(store.sentBytes(name) / bytes.length).toBeLessThan(0.25)
    }
  })
})

describe('a film prepared as the page prepares it, by mediabunny and without sound and tags', () => {
  it.each(['with-sound.mp4', 'place-in-keys.mov', 'b-frames.mp4', 'uneven.mov', 'slow-240.mp4'])('%s is taken, its frames within a tick', async (name) => {
    const film = await readAccepted(`prepared-${name}`, await prepare(readMadeFilm(name)))
    const truth = readTruth(name)
    const seconds = (ticks: number[], timeBase: number) => ticks.map(tick => tick / timeBase)
    const offsets = seconds(film.frameTicks, film.timeBase).map((second, index) => Math.abs(second - (seconds(truth.ticks, truth.timeBase)[index] ?? NaN)))
    expect(film.frameCount).toBe(truth.ticks.length)
    expect(Math.max(...offsets)).toBeLessThan(1 / film.timeBase)
    expect(film).toMatchObject({ container: 'mp4', hasSound: false, hasLocation: false, deviceTags: [] })
  })
})

describe('a film that is refused', () => {
  it.each([
    ['sound-only.mp4', 'not-video'],
    ['one-frame.mp4', 'no-frames'],
    ['hevc.mp4', 'codec-not-shown'],
    ['ten-bit.mp4', 'codec-not-shown'],
    ['prores.mov', 'codec-not-shown'],
    ['mpeg4-part2.mp4', 'codec-not-shown'],
    ['over-a-minute.mp4', 'too-long'],
    ['fifteen.mp4', 'too-few-frames-a-second'],
    ['place-in-keys.mov', 'has-location'],
    ['place-in-text.mov', 'has-location'],
    ['place-in-user-data.mp4', 'has-location'],
    ['place.webm', 'has-location'],
    ['with-sound.mp4', 'has-sound'],
    ['vp8-with-sound.webm', 'has-sound'],
  ])('%s: %s', async (name, reason) => {
    expect(await read(name)).toMatchObject({ kind: 'refused', reason })
  })

  it('the same films without what they are refused for are taken', async () => {
    // Control: each of them differs from this one by one thing only.
    await expect(readAccepted('plain-30.mp4')).resolves.toMatchObject({ frameCount: 60 })
  })

  it('for a place inside a block of another format', async () => {
    const block = box('udta', box('XMP_', latin('<rdf:Description exif:GPSLatitude="55,42N"/>')))
    expect(await read('xmp.mp4', addToIndex(readMadeFilm('plain-30.mp4'), block))).toMatchObject({ reason: 'has-location' })
  })

  it('when it is cut short, before its index or in the middle of its frames', async () => {
    const late = readMadeFilm('plain-30.mp4')
    const early = readMadeFilm('faststart-30.mp4')
    expect(await read('cut-late.mp4', late.subarray(0, late.length / 2))).toMatchObject({ reason: 'unreadable' })
    expect(await read('cut-early.mp4', early.subarray(0, early.length - 1000))).toMatchObject({ reason: 'unreadable' })
  })

  it('when its index announces fragments and none follow', async () => {
    const film = readMadeFilm('fragmented.mp4')
    expect(await read('no-fragments.mp4', film.subarray(0, film.indexOf('moof') - 4))).toMatchObject({ reason: 'no-frames' })
  })

  it('when it is over 500 MB, without asking the store', async () => {
    const url = store.put('large.mp4', readMadeFilm('plain-30.mp4'))
    expect(await readFilm({ url, bytes: 500 * 1024 * 1024 + 1, workerPath: worker.path })).toMatchObject({ reason: 'too-large' })
    expect(store.sentBytes('large.mp4')).toBe(0)
  })

  it('when it is a WebM over 32 MB, without reading all of it', async () => {
    const bytes = Buffer.concat([readMadeFilm('vp9.webm'), Buffer.alloc(32 * 1024 * 1024)])
    expect(await read('large.webm', bytes)).toMatchObject({ reason: 'webm-too-large' })
    expect(store.sentBytes('large.webm')).toBeLessThan(100_000)
  })

  it('when its tables are real and say that it lasts ten minutes', async () => {
    // 72,000 frames at 120 a second; only the tables count, so the frames are one byte each.
    const frames = Buffer.alloc(72_000)
    expect(await read('ten-minutes.mp4', longMovie(frames))).toMatchObject({ reason: 'too-long' })
  })
})

async function prepare(film: Uint8Array): Promise<Uint8Array> {
  const input = new Input({ formats: [MP4, QTFF], source: new BufferSource(film) })
  const output = new Output({ format: new Mp4OutputFormat(), target: new BufferTarget() })
  const conversion = await Conversion.init({ input, output, audio: { discard: true }, tags: {}, showWarnings: false })
  await conversion.execute()
  return new Uint8Array(output.target.buffer ?? new ArrayBuffer(0))
}

function longMovie(frames: Buffer): Buffer {
  const film = movie({}, { after: [box('mdat', frames)] })
  const patch = (type: string, at: number, value: number) => film.writeUInt32BE(value, film.indexOf(latin(type)) + 4 + at)
  patch('stts', 8, frames.length)
  patch('stts', 12, 128)
  patch('stsz', 4, 1)
  patch('stsz', 8, frames.length)
  patch('stsc', 12, frames.length)
  patch('mdhd', 16, frames.length * 128)
  return film
}
