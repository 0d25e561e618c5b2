import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { call } from '#tests/support/call'
import { HOSTILE_FILMS } from '#tests/support/film/hostile'
import { idOf, startDraft, uploadClip } from '#tests/support/path'
import { readStore } from '#tests/support/store'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

/** The bar for the files that claim 2^31 samples; every other one has the reader's own limit. */
const SAMPLES_REFUSED_WITHIN_MS = 2000
const READER_LIMIT_MS = 20_000

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 4 })
})

afterAll(() => world.close())

/** Asks for something small over and over until `isDone`, and tells the longest wait for an answer. */
async function longestAnswerMs(isDone: () => boolean): Promise<{ answers: number, longestMs: number }> {
  let answers = 0
  let longestMs = 0
  while (!isDone()) {
    const startedAt = performance.now()
    const { status } = await call(world, 'GET', '/api/account', { as: 'coach' })
    expect(status).toBe(200)
    longestMs = Math.max(longestMs, performance.now() - startedAt)
    answers += 1
  }
  return { answers, longestMs }
}

describe('[house.5] hostile and broken film on the built server', () => {
  // An empty file gets no upload at all.
  const names = Object.keys(HOSTILE_FILMS).filter(name => HOSTILE_FILMS[name]?.().length !== 0)

  it('[film.3] there are at least sixty, each another', () => {
    const different = new Set(names.map(name => HOSTILE_FILMS[name]?.().toString('latin1')))
    expect(different.size).toBe(names.length)
    expect(names.length).toBeGreaterThanOrEqual(60)
  })

  it('[house.5] there is one that claims 2^31 samples', () => {
    expect(names.filter(name => name.startsWith('2^31')).length).toBeGreaterThan(0)
  })

  for (const name of names) {
    const limitMs = name.startsWith('2^31') ? SAMPLES_REFUSED_WITHIN_MS : READER_LIMIT_MS
    it(`[house.5] [film.3] ${name}: refused in under ${limitMs / 1000} seconds, and other requests are answered meanwhile`, async () => {
      const reviewId = await startDraft(world, 'student')
      const { clipId } = await uploadClip(world, 'student', reviewId, { bytes: HOSTILE_FILMS[name]?.() })
      let isDone = false
      const startedAt = performance.now()
      const completed = call(world, 'POST', `/api/clips/${clipId}/complete`, { as: 'student', body: {} }).then((answer) => {
        isDone = true
        return { answer, tookMs: performance.now() - startedAt }
      })
      const { answers, longestMs } = await longestAnswerMs(() => isDone)
      const { answer, tookMs } = await completed
      expect(answer.body).toMatchObject({ id: clipId, state: 'refused', refusal: expect.stringMatching(/^(?:unreadable|not-video)$/) })
      expect(tookMs).toBeLessThan(limitMs)
      expect(answers).toBeGreaterThan(0)
      expect(longestMs).toBeLessThan(1000)
      expect(idOf(answer)).toBe(clipId)
    })
  }

  it('[film.3] an empty file is refused before anything is sent', async () => {
    const reviewId = await startDraft(world, 'student')
    const answer = await call(world, 'POST', `/api/reviews/${reviewId}/clips`, { as: 'student', body: { view: 'face_on', fileName: 'empty.mp4', bytes: 0, contentType: 'video/mp4' } })
    expect(answer).toMatchObject({ status: 422, body: { data: { fields: { bytes: 'This file is empty.' } } } })
  })

  it('[house.5] [film.3] nothing of them is left in the store', async () => {
    expect(await readStore(world)).toEqual({ objects: [], uploads: [] })
  })
})
