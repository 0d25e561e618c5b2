import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { idOf, sendClip, startDraft, submitted, uploadClip } from '#tests/support/path'
import { sendPhoto } from '#tests/support/photo'
import { failStore, mismatches, readStore, runJob, storeOf } from '#tests/support/store'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

const HOUR_MS = 60 * 60_000

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 43 })
})

afterAll(() => world.close())

beforeEach(() => world.moveClock(0))

/** A day and an hour later. */
async function sweepTomorrow(): Promise<void> {
  world.moveClock(25 * HOUR_MS)
  await runJob(world, 'film:sweep')
}

async function storedKeys(): Promise<string[]> {
  return (await readStore(world)).objects.map(({ key }) => key)
}

function keyOf(clipId: string): string {
  return arrange(world, database => String(database.prepare('select object_key from clips where id = ?').pluck().get(clipId)))
}

async function clipsOf(reviewId: string) {
  return call(world, 'GET', `/api/reviews/${reviewId}`, { as: 'student' })
}

async function addPhoto(reviewId: string): Promise<string> {
  expect((await sendPhoto(world, reviewId)).status).toBe(201)
  return arrange(world, database => String(database.prepare('select object_key from photos where review_id = ?').pluck().get(reviewId)))
}

describe('[film.5] an upload that nobody goes on with', () => {
  it('[film.5] is gone from store and review after a day, and not before', async () => {
    const reviewId = await startDraft(world, 'student')
    const { clipId } = await uploadClip(world, 'student', reviewId)
    const key = keyOf(clipId)
    expect((await readStore(world)).uploads.map(upload => upload.key)).toContain(key)

    world.moveClock(23 * HOUR_MS)
    await runJob(world, 'film:sweep')
    expect((await clipsOf(reviewId)).body).toMatchObject({ clips: [{ id: clipId, state: 'uploading' }] })
    expect((await readStore(world)).uploads.map(upload => upload.key)).toContain(key)

    await sweepTomorrow()
    expect((await clipsOf(reviewId)).body).toMatchObject({ clips: [] })
    expect((await readStore(world)).uploads.map(upload => upload.key)).not.toContain(key)
    expect((await call(world, 'POST', `/api/clips/${clipId}/complete`, { as: 'student', body: {} })).status).toBe(404)
    expect(await mismatches(world)).toEqual([])
  })

  it('[film.5] leaves what arrived whole alone, the same film and its photograph', async () => {
    const reviewId = await startDraft(world, 'student')
    const clip = (await sendClip(world, 'student', reviewId)).body
    const photo = await addPhoto(reviewId)
    await sweepTomorrow()
    await runJob(world, 'film:sweep')
    expect((await clipsOf(reviewId)).body).toMatchObject({ clips: [clip], photos: [{ kind: 'grip' }] })
    expect(await storedKeys()).toContain(photo)
    expect(await mismatches(world)).toEqual([])
  })

  it('[film.5] whose parts were joined by a server that ended before it said so is gone too', async () => {
    const reviewId = await startDraft(world, 'student')
    const { clipId } = await uploadClip(world, 'student', reviewId)
    const key = keyOf(clipId)
    const store = storeOf(world)
    const uploadId = (await readStore(world)).uploads.find(upload => upload.key === key)?.uploadId ?? ''
    await store.completeUpload(key, uploadId, await store.listParts(key, uploadId))
    expect(await storedKeys()).toContain(key)
    await sweepTomorrow()
    expect(await storedKeys()).not.toContain(key)
    expect((await clipsOf(reviewId)).body).toMatchObject({ clips: [] })
    expect(await mismatches(world)).toEqual([])
  })

  it('[film.5] of a review that moved on stays in it as refused, without film', async () => {
    const { id } = await submitted(world, 'student')
    const { clipId } = await uploadClip(world, 'student', await startDraft(world, 'student'))
    arrange(world, database => database.prepare('update clips set review_id = ? where id = ?').run(id, clipId))
    await sweepTomorrow()
    expect((await clipsOf(id)).body).toMatchObject({ state: 'waiting', clips: [{ state: 'accepted' }, { id: clipId, state: 'refused', refusal: 'unreadable' }] })
    expect(await mismatches(world)).toEqual([])
  })
})

describe('[film.5] what no row names', () => {
  it('[film.5] an upload begun by a server that ended before it wrote it down is given up', async () => {
    await storeOf(world).createUpload('film/nobody/stray.mp4', 'video/mp4')
    await runJob(world, 'film:sweep')
    expect((await readStore(world)).uploads.map(({ key }) => key)).toContain('film/nobody/stray.mp4')
    await sweepTomorrow()
    expect((await readStore(world)).uploads).toEqual([])
  })

  it('[film.5] film and photographs are removed after a day, and nothing outside their folders', async () => {
    const strays = ['film/a.mp4', 'film/z/z.mp4', 'photos/a.webp', 'photos/z/z.webp']
    const foreign = ['backups/film/a.sqlite', 'films.txt', 'photo']
    for (const key of [...strays, ...foreign]) await storeOf(world).put(key, Buffer.from('left behind'), 'text/plain')
    await runJob(world, 'film:sweep')
    expect(await storedKeys()).toEqual(expect.arrayContaining([...strays, ...foreign]))
    await sweepTomorrow()
    const left = await storedKeys()
    expect(left.filter(key => strays.includes(key))).toEqual([])
    expect(left.filter(key => foreign.includes(key))).toEqual(foreign)
    for (const key of foreign) await storeOf(world).remove(key)
  })

  it('[film.5] film that was refused while the store would not let it go is removed at the next sweep', async () => {
    const reviewId = await startDraft(world, 'student')
    await failStore(world, { match: '^DELETE ', status: 500, times: 3 })
    const answer = await sendClip(world, 'student', reviewId, { path: 'tests/support/film/made/with-sound.mp4' })
    expect(answer.body).toMatchObject({ state: 'refused', refusal: 'has-sound' })
    const key = keyOf(idOf(answer))
    expect(await storedKeys()).toContain(key)
    await runJob(world, 'film:sweep')
    expect(await storedKeys()).not.toContain(key)
    expect(await mismatches(world)).toEqual([])
  })

  it('[film.5] is found among more than a page of the store', async () => {
    const { clipId } = await submitted(world, 'student2')
    const key = keyOf(clipId)
    const store = storeOf(world)
    // The store lists a thousand at a time; half of these sort before the clip and half after it.
    const strays = Array.from({ length: 1010 }, (_, index) => `film/${index % 2 === 0 ? '!' : '~'}${String(index).padStart(5, '0')}`)
    for (let at = 0; at < strays.length; at += 50) await Promise.all(strays.slice(at, at + 50).map(stray => store.put(stray, Buffer.from([1]), 'video/mp4')))
    await sweepTomorrow()
    expect((await storedKeys()).filter(stored => stored.startsWith('film/!') || stored.startsWith('film/~'))).toEqual([])
    expect(await storedKeys()).toContain(key)
    expect(await mismatches(world)).toEqual([])
  }, 60_000)
})

describe('[film.5] a row without its object', () => {
  it('[film.5] is refused, so that the student is asked for the film again; a photograph is taken out of the review', async () => {
    const reviewId = await startDraft(world, 'student')
    const clipId = idOf(await sendClip(world, 'student', reviewId))
    const kept = idOf(await sendClip(world, 'student', reviewId))
    const photo = await addPhoto(reviewId)
    await storeOf(world).remove(keyOf(clipId))
    await storeOf(world).remove(photo)
    await sweepTomorrow()
    expect((await clipsOf(reviewId)).body).toMatchObject({ clips: [{ id: clipId, state: 'refused', refusal: 'unreadable' }, { id: kept, state: 'accepted' }], photos: [] })
    expect((await call(world, 'GET', `/api/clips/${clipId}/film`, { as: 'student' })).status).toBe(404)
    expect(await mismatches(world)).toEqual([])
  })

  it('[film.5] nothing is changed when far too many are missing: that is another store, not lost film', async () => {
    const reviewId = await startDraft(world, 'student')
    const clipId = idOf(await sendClip(world, 'student', reviewId))
    arrange(world, (database) => {
      const copy = database.prepare(`
        insert into clips (id, review_id, view, state, file_name, content_type, bytes, object_key, frame_ticks, time_base, created_at_ms, completed_at_ms, read_at_ms)
        select ?, review_id, view, state, file_name, content_type, bytes, ?, frame_ticks, time_base, created_at_ms, completed_at_ms, read_at_ms from clips where id = ?`)
      for (let index = 0; index < 51; index += 1) copy.run(`missing-${index}`, `film/missing/${index}`, clipId)
    })
    await sweepTomorrow()
    const states = arrange(world, database => database.prepare('select distinct state from clips where id like \'missing-%\'').pluck().all())
    expect(states).toEqual(['accepted'])
    arrange(world, database => database.prepare('delete from clips where id = \'missing-0\'').run())
    await runJob(world, 'film:sweep')
    expect(arrange(world, database => database.prepare('select distinct state from clips where id like \'missing-%\'').pluck().all())).toEqual(['refused'])
  })
})

describe('[film.5] a sweep beside people who send', () => {
  it('[film.5] takes nothing from them, twice at once', async () => {
    const sending = Array.from({ length: 6 }, async () => {
      const reviewId = await startDraft(world, 'student')
      await addPhoto(reviewId)
      return (await sendClip(world, 'student', reviewId)).body
    })
    const sweeps = [runJob(world, 'film:sweep'), runJob(world, 'film:sweep')]
    expect((await Promise.all(sending)).map(body => body)).toEqual(Array.from({ length: 6 }, () => expect.objectContaining({ state: 'accepted' })))
    await Promise.all(sweeps)
    expect(await mismatches(world)).toEqual([])
  })

  it('[film.5] goes on with the rest when the store fails in one place', async () => {
    await failStore(world, { match: '^GET .*list-type=2&prefix=film', status: 500, times: 3 })
    await storeOf(world).put('photos/stray.webp', Buffer.from([1]), 'image/webp')
    await sweepTomorrow()
    expect(await storedKeys()).not.toContain('photos/stray.webp')
  })
})
