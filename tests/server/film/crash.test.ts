import { setTimeout as wait } from 'node:timers/promises'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { FILM, idOf, startDraft, uploadClip } from '#tests/support/path'
import { failStore, mismatches, readStore, runJob, storeOf } from '#tests/support/store'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import { readFile } from 'node:fs/promises'

const MINUTE_MS = 60_000

let world: World
let reviewId: string

beforeAll(async () => {
  world = await startWorld({ index: 44 })
})

afterAll(() => world.close())

beforeEach(async () => {
  world.moveClock(0)
  reviewId = await startDraft(world, 'student')
})

/** Asks for completion and ends the server hard once the store has a request that fits `match`, which it never answers. */
async function killAt(clipId: string, match: string, before: Record<string, unknown>[] = []): Promise<void> {
  for (const order of before) await failStore(world, order)
  await failStore(world, { match, hang: true })
  const asked = call(world, 'POST', `/api/clips/${clipId}/complete`, { as: 'student', body: {} }).catch(() => undefined)
  await untilHanging()
  await world.restart({ signal: 'SIGKILL' })
  expect(await asked).toBeUndefined()
}

async function untilHanging(): Promise<void> {
  for (let tries = 0; tries < 200; tries += 1) {
    const state: unknown = await (await fetch(`${world.standIns.storageUrl}/__fake__/state`)).json()
    if (typeof state === 'object' && state !== null && 'hanging' in state && state.hanging !== 0) return
    await wait(25)
  }
  throw new Error('The server never came to the request at which it was to be ended.')
}

function stateOf(clipId: string): unknown {
  return arrange(world, database => database.prepare('select state from clips where id = ?').pluck().get(clipId))
}

async function clipInReview(): Promise<unknown> {
  return (await call(world, 'GET', `/api/reviews/${reviewId}`, { as: 'student' })).body
}

const COMPLETION = '^POST .*uploadId='
const LOOK = '^HEAD .*/film/'

describe('[film.5] a server that is killed between completion and reading', () => {
  const moments = [
    { when: 'before the parts are joined', match: COMPLETION, before: [], left: 'uploading', isJoined: false },
    // The first try joins and loses its answer, the second is never answered.
    { when: 'after the parts are joined and before that is noted', match: COMPLETION, before: [{ match: COMPLETION, reset: true, afterCommit: true }], left: 'uploading', isJoined: true },
    { when: 'before the film is read', match: LOOK, before: [], left: 'reading', isJoined: true },
  ]
  for (const { when, match, before, left, isJoined } of moments) {
    it(`[film.5] ${when}: the clip is read without anybody asking again`, async () => {
      const { clipId } = await uploadClip(world, 'student', reviewId)
      await killAt(clipId, match, before)
      expect(stateOf(clipId)).toBe(left)
      expect((await readStore(world)).objects.some(({ key }) => key.includes(clipId))).toBe(isJoined)
      world.moveClock(3 * MINUTE_MS)
      await runJob(world, 'film:read')
      expect(await clipInReview()).toMatchObject({ clips: [{ id: clipId, state: 'accepted', durationMs: 2000, swings: [{ number: 1 }] }] })
      expect(await mismatches(world)).toEqual([])
    })

    it(`[film.5] ${when}: or at once, when the page asks again`, async () => {
      const { clipId } = await uploadClip(world, 'student', reviewId)
      await killAt(clipId, match, before)
      const again = await call(world, 'POST', `/api/clips/${clipId}/complete`, { as: 'student', body: {} })
      expect(again).toMatchObject({ status: 200, body: { id: clipId, state: 'accepted' } })
      world.moveClock(3 * MINUTE_MS)
      await runJob(world, 'film:read')
      expect(await clipInReview()).toMatchObject({ clips: [again.body] })
      expect(await mismatches(world)).toEqual([])
    })
  }

  it('[film.5] is not taken for one that is still at work', async () => {
    const { clipId } = await uploadClip(world, 'student', reviewId)
    await killAt(clipId, LOOK)
    world.moveClock(MINUTE_MS)
    await runJob(world, 'film:read')
    expect(stateOf(clipId)).toBe('reading')
  })
})

describe('[film.5] a reading that cannot succeed ends', () => {
  async function reading(): Promise<{ clipId: string, key: string }> {
    const { clipId } = await uploadClip(world, 'student', reviewId)
    await killAt(clipId, LOOK)
    const key = arrange(world, database => String(database.prepare('select object_key from clips where id = ?').pluck().get(clipId)))
    return { clipId, key }
  }

  it('[film.5] at once, when the store no longer has the film', async () => {
    const { clipId, key } = await reading()
    await storeOf(world).remove(key)
    world.moveClock(3 * MINUTE_MS)
    await runJob(world, 'film:read')
    expect(await clipInReview()).toMatchObject({ clips: [{ id: clipId, state: 'refused', refusal: 'unreadable' }] })
    expect(await mismatches(world)).toEqual([])
  })

  it('[film.5] after a day of tries, ever farther apart, when the store never gives it', async () => {
    const { clipId, key } = await reading()
    await failStore(world, { match: LOOK, status: 500, times: 1000 })
    let minutes = 0
    let tries = 0
    const attempts = () => Number(arrange(world, database => database.prepare('select read_attempts from clips where id = ?').pluck().get(clipId)))
    while (stateOf(clipId) === 'reading' && minutes < 3000) {
      minutes += 15
      world.moveClock(minutes * MINUTE_MS)
      const before = attempts()
      await runJob(world, 'film:read')
      tries += attempts() - before
    }
    expect(stateOf(clipId)).toBe('refused')
    expect(tries).toBeGreaterThan(20)
    expect(tries).toBeLessThan(30)
    expect(minutes).toBeGreaterThan(20 * 60)
    expect(minutes).toBeLessThan(30 * 60)
    expect((await readStore(world)).objects.map(object => object.key)).not.toContain(key)
    await fetch(`${world.standIns.storageUrl}/__fake__/reset`, { method: 'POST' })
  }, 120_000)

  it('[film.5] and one that is given up by its student in between leaves nothing', async () => {
    const { clipId } = await reading()
    expect((await call(world, 'DELETE', `/api/clips/${clipId}`, { as: 'student' })).status).toBe(200)
    world.moveClock(3 * MINUTE_MS)
    await runJob(world, 'film:read')
    expect(await clipInReview()).toMatchObject({ clips: [] })
    expect((await readStore(world)).objects.some(({ key }) => key.includes(clipId))).toBe(false)
  })
})

describe('an upload that the store has lost', () => {
  it('is told as that, and can be removed and sent again', async () => {
    const { clipId } = await uploadClip(world, 'student', reviewId)
    const key = arrange(world, database => String(database.prepare('select object_key from clips where id = ?').pluck().get(clipId)))
    const upload = (await readStore(world)).uploads.find(candidate => candidate.key === key)
    await storeOf(world).abortUpload(key, upload?.uploadId ?? '')
    for (const path of ['parts', 'complete']) {
      expect(await call(world, 'POST', `/api/clips/${clipId}/${path}`, { as: 'student', body: {} })).toMatchObject({ status: 410, body: { data: { code: 'upload-gone' } } })
    }
    expect((await call(world, 'DELETE', `/api/clips/${clipId}`, { as: 'student' })).status).toBe(200)
  })

  it('one that lacks a part says so, and is not taken up by the job', async () => {
    const bytes = await readFile(FILM)
    const started = await call(world, 'POST', `/api/reviews/${reviewId}/clips`, { as: 'student', body: { view: 'face_on', fileName: 'swing.mp4', bytes: bytes.length, contentType: 'video/mp4' } })
    const clip = started.body
    const id = typeof clip === 'object' && clip !== null && 'clip' in clip ? idOf({ ...started, body: clip.clip }) : ''
    expect(await call(world, 'POST', `/api/clips/${id}/complete`, { as: 'student', body: {} })).toMatchObject({ status: 409, body: { data: { code: 'parts-missing' } } })
    world.moveClock(3 * MINUTE_MS)
    await runJob(world, 'film:read')
    expect(stateOf(id)).toBe('uploading')
  })
})
