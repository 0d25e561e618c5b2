import { readFile } from 'node:fs/promises'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { FILM_REFUSALS, isFilmRefusal } from '#shared/domain/film/refusals'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { readTruth } from '#tests/support/film/films'
import { idOf, sendClip, startDraft } from '#tests/support/path'
import { mismatches, readStore } from '#tests/support/store'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 45 })
})

afterAll(() => world.close())

const MADE = 'tests/support/film/made'
const CONTENT_TYPES: Record<string, string> = { mp4: 'video/mp4', mov: 'video/quicktime', webm: 'video/webm' }

function send(name: string, reviewId: string) {
  return sendClip(world, 'student', reviewId, { path: `${MADE}/${name}`, contentType: CONTENT_TYPES[name.split('.')[1] ?? ''] })
}

const storedFrames = z.object({ time_base: z.number(), frame_ticks: z.instanceof(Buffer), object_key: z.string() })

function storedClip(id: string) {
  const row = storedFrames.parse(arrange(world, database => database.prepare('select time_base, frame_ticks, object_key from clips where id = ?').get(id)))
  const bytes = new Uint8Array(row.frame_ticks)
  return { timeBase: row.time_base, ticks: [...new Float64Array(bytes.buffer)], key: row.object_key }
}

/** What a phone writes into a file of where it was, and of a track that is not picture. */
const PLACES = ['+55.7', '\u00a9xyz', 'ISO6709', 'loci', 'LOCATION']
const SOUNDS = ['soun', 'mp4a', 'A_VORBIS', 'A_OPUS']

const ACCEPTED = [
  ['plain-30.mp4', { durationMs: 2000, framesPerSecond: 30 }],
  ['faststart-30.mp4', { durationMs: 2000 }],
  ['b-frames.mp4', { durationMs: 2000 }],
  ['negative-offsets.mp4', { durationMs: 1000 }],
  ['fragmented.mp4', { durationMs: 2000 }],
  ['slow-240.mp4', { durationMs: 500, framesPerSecond: 240 }],
  ['ntsc-29.97.mp4', { durationMs: 1001 }],
  ['uneven.mov', { durationMs: 2005 }],
  ['edit-list.mp4', { durationMs: 1500 }],
  ['rotated-90.mov', { widthPx: 160, heightPx: 96 }],
  ['vp9.webm', { widthPx: 96, heightPx: 160 }],
  ['live.webm', { widthPx: 96, heightPx: 160 }],
] as const

describe('[film.2] film as phones make it, through the server', () => {
  it.each(ACCEPTED)('[film.2] %s is taken with the frame times of its container, and served byte for byte, silent and without a place', async (name, facts) => {
    const answer = await send(name, await startDraft(world, 'student'))
    expect(answer.body).toMatchObject({ state: 'accepted', refusal: null, ...facts })
    const stored = storedClip(idOf(answer))
    expect({ timeBase: stored.timeBase, ticks: stored.ticks }).toEqual(readTruth(name))

    const shown = await call(world, 'GET', `/api/clips/${idOf(answer)}/film`, { as: 'student' })
    expect(shown.status).toBe(302)
    const served = Buffer.from(await (await fetch(shown.headers.get('location') ?? '')).arrayBuffer())
    expect(served.equals(await readFile(`${MADE}/${name}`))).toBe(true)
    for (const mark of [...PLACES, ...SOUNDS]) expect(served.includes(Buffer.from(mark, 'latin1'))).toBe(false)
  })

  const refused = [
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
  ] as const

  it.each(refused)('[film.2] %s is refused as %s, with words of what to do, and nothing of it is kept or served', async (name, reason) => {
    const reviewId = await startDraft(world, 'student')
    const answer = await send(name, reviewId)
    expect(answer.body).toMatchObject({ state: 'refused', refusal: reason })
    expect(isFilmRefusal(reason) && FILM_REFUSALS[reason].whatToDo.length).toBeGreaterThan(20)
    expect((await readStore(world)).objects.filter(({ key }) => key.includes(reviewId))).toEqual([])
    expect((await call(world, 'GET', `/api/clips/${idOf(answer)}/film`, { as: 'student' })).status).toBe(404)
  })

  it('[film.2] the marks looked for above are in the films that hold them', async () => {
    const [place, sound] = await Promise.all([readFile(`${MADE}/place-in-keys.mov`), readFile(`${MADE}/with-sound.mp4`)])
    expect(PLACES.some(mark => place.includes(Buffer.from(mark, 'latin1')))).toBe(true)
    expect(SOUNDS.some(mark => sound.includes(Buffer.from(mark, 'latin1')))).toBe(true)
  })

  it('[film.2] no film is without its row afterwards, and no row without its film', async () => {
    expect(await mismatches(world)).toEqual([])
  })
})

describe('the rate at which a phone filmed slow motion', () => {
  async function complete(captureFramesPerSecond: number) {
    const reviewId = await startDraft(world, 'student')
    const bytes = await readFile(`${MADE}/plain-30.mp4`)
    const started = await call(world, 'POST', `/api/reviews/${reviewId}/clips`, {
      as: 'student', body: { view: 'face_on', fileName: 'swing.mp4', bytes: bytes.length, contentType: 'video/mp4', captureFramesPerSecond, preparedAs: 'cut' },
    })
    const { clip, parts } = z.object({ clip: z.object({ id: z.string() }), parts: z.array(z.object({ url: z.string() })) }).parse(started.body)
    await fetch(parts[0]?.url ?? '', { method: 'PUT', body: new Uint8Array(bytes) })
    return call(world, 'POST', `/api/clips/${clip.id}/complete`, { as: 'student', body: {} })
  }

  it('is what the page told of it, since preparing took the tag out', async () => {
    expect((await complete(240)).body).toMatchObject({ state: 'accepted', framesPerSecond: 30, captureFramesPerSecond: 240, preparedAs: 'cut' })
  })

  it('and a time-lapse is refused, though it plays smoothly', async () => {
    expect((await complete(10)).body).toMatchObject({ state: 'refused', refusal: 'too-few-frames-a-second' })
  })
})
