import { existsSync, readdirSync } from 'node:fs'
import { readFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { resolve } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { addToIndex, metadata } from '#tests/support/film/boxes'
import { readMadeFilm, readTruth } from '#tests/support/film/films'
import { idOf, sendClip, startDraft } from '#tests/support/path'
import { mismatches, readStore } from '#tests/support/store'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

/** Debian's, where it is installed; else one that turns everything into a film of sixty frames. */
const REAL = ['/usr/bin/ffmpeg', '/usr/local/bin/ffmpeg'].find(path => existsSync(path))
const STAND_IN = resolve('tests/support/film/conversion/ffmpeg-stand-in.sh')
const FAILS = resolve('tests/support/film/conversion/ffmpeg-fails.sh')
const FRAMES_OF_STAND_IN = 60

let world: World
let failing: World

beforeAll(async () => {
  world = await startWorld({ index: 46, environment: { FFMPEG_PATH: REAL ?? STAND_IN } })
  failing = await startWorld({ index: 48, environment: { FFMPEG_PATH: FAILS } })
})

afterAll(async () => {
  await world.close()
  await failing.close()
})

async function convert(bytes: Buffer, contentType = 'video/mp4') {
  const answer = await sendClip(world, 'student', await startDraft(world, 'student'), { bytes, contentType })
  const shown = await call(world, 'GET', `/api/clips/${idOf(answer)}/film`, { as: 'student' })
  const served = shown.status === 302 ? Buffer.from(await (await fetch(shown.headers.get('location') ?? '')).arrayBuffer()) : undefined
  return { answer, served }
}

const storedFrames = z.object({ codec: z.string(), content_type: z.string(), bytes: z.number(), time_base: z.number(), frame_ticks: z.instanceof(Buffer) })

function stored(id: string) {
  const row = storedFrames.parse(arrange(world, database => database.prepare('select codec, content_type, bytes, time_base, frame_ticks from clips where id = ?').get(id)))
  const ticks = [...new Float64Array(new Uint8Array(row.frame_ticks).buffer)]
  return { ...row, seconds: ticks.map(tick => tick / row.time_base) }
}

function leftOvers(): string[] {
  return readdirSync(tmpdir()).filter(name => name.startsWith('turfnote-film-'))
}

const FILMS = [['hevc.mp4', 'video/mp4'], ['ten-bit.mp4', 'video/mp4'], ['prores.mov', 'video/quicktime'], ['mpeg4-part2.mp4', 'video/mp4']] as const

describe('film that browsers cannot show, where the studio has ffmpeg', () => {
  it.each(FILMS)('%s is converted in its place, every frame at its own time', async (name, contentType) => {
    const { answer, served } = await convert(readMadeFilm(name), contentType)
    expect(answer.body).toMatchObject({ state: 'accepted', refusal: null })
    const clip = stored(idOf(answer))
    expect(clip).toMatchObject({ codec: expect.stringMatching(/^avc1\.64/), content_type: 'video/mp4', bytes: served?.length })
    const truth = readTruth(name)
    expect(clip.seconds).toHaveLength(REAL ? truth.ticks.length : FRAMES_OF_STAND_IN)
    const first = truth.ticks[0] ?? 0
    if (REAL) clip.seconds.forEach((second, index) => expect(second).toBeCloseTo(((truth.ticks[index] ?? NaN) - first) / truth.timeBase, 6))
    expect(await mismatches(world)).toEqual([])
  })

  it('what else the film held is not in what is kept: sound, place, make', async () => {
    const located = addToIndex(readMadeFilm('hevc.mp4'), metadata('com.apple.quicktime.location.ISO6709', 1, Buffer.from('+55.7000-002.9000/')))
    const { answer, served } = await convert(located)
    expect(answer.body).toMatchObject({ state: 'accepted' })
    for (const mark of ['+55.7', 'ISO6709', 'soun', 'Lavf', 'x265']) expect(served?.includes(mark)).toBe(false)
  })

  it('but the rate at which a phone filmed it is', async () => {
    const rate = Buffer.alloc(4)
    rate.writeFloatBE(240)
    const { answer } = await convert(addToIndex(readMadeFilm('hevc.mp4'), metadata('com.android.capture.fps', 23, rate)))
    expect(answer.body).toMatchObject({ state: 'accepted', captureFramesPerSecond: 240 })
  })

  it('film that is refused for another reason is refused as ever, and film that is shown is not touched', async () => {
    const sound = await convert(readMadeFilm('with-sound.mp4'))
    expect(sound.answer.body).toMatchObject({ state: 'refused', refusal: 'has-sound' })
    const plain = await convert(readMadeFilm('plain-30.mp4'))
    expect(plain.served?.equals(await readFile('tests/support/film/made/plain-30.mp4'))).toBe(true)
  })

  it('a second request for the same clip waits for the same conversion', async () => {
    const started = await sendClip(world, 'student', await startDraft(world, 'student'), { bytes: readMadeFilm('hevc.mp4') })
    const again = await call(world, 'POST', `/api/clips/${idOf(started)}/complete`, { as: 'student', body: {} })
    expect(again.body).toEqual(started.body)
  })

  it('nothing of it is left on the server\'s own disk', () => {
    expect(leftOvers()).toEqual([])
  })
})

describe('film that ffmpeg cannot convert either', () => {
  it('is refused as without it, and nothing is kept', async () => {
    const answer = await sendClip(failing, 'student', await startDraft(failing, 'student'), { bytes: readMadeFilm('hevc.mp4') })
    expect(answer.body).toMatchObject({ state: 'refused', refusal: 'codec-not-shown' })
    expect((await readStore(failing)).objects).toEqual([])
    expect(leftOvers()).toEqual([])
  })
})
