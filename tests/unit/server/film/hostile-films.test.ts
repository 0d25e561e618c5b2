import type { FilmFacts } from '#shared/domain/film/reading'
import type { RangeServer } from '#tests/support/film/range-server'
import type { BuiltWorker } from '#tests/support/film/worker'
import process from 'node:process'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { answerTask } from '#server/features/film/reading/answer-task'
import { RangeReader } from '#server/features/film/reading/range-reader'
import { readFilm } from '#server/features/film/reading/read-film'
import { FILM_MAX_DURATION_MS, FILM_MAX_FRAME_COUNT } from '#shared/domain/film/limits'
import { movie } from '#tests/support/film/boxes'
import { readMadeFilm } from '#tests/support/film/films'
import { HOSTILE_FILMS } from '#tests/support/film/hostile'
import { startRangeServer } from '#tests/support/film/range-server'
import { buildWorkerForTest } from '#tests/support/film/worker'

let store: RangeServer
let worker: BuiltWorker

beforeAll(async () => {
  // The parser warns of what it does not understand; in the worker nobody hears it.
  vi.spyOn(console, 'warn').mockImplementation(() => {})
  vi.spyOn(console, 'error').mockImplementation(() => {})
  store = await startRangeServer()
  worker = await buildWorkerForTest()
}, 60_000)

afterAll(async () => {
  vi.restoreAllMocks()
  await store.close()
  await worker.remove()
})

function read(name: string, bytes: Uint8Array) {
  return readFilm({ url: store.put(name, bytes), bytes: bytes.length, workerPath: worker.path })
}

/** Longest time between two ticks of a 5 ms timer while something runs: how long a request would have waited. */
async function measureLongestGapMs(run: () => Promise<unknown>): Promise<number> {
  let [last, longest] = [performance.now(), 0]
  const note = () => {
    const now = performance.now()
    longest = Math.max(longest, now - last)
    last = now
  }
  const timer = setInterval(note, 5)
  await run()
  note()
  clearInterval(timer)
  return longest
}

const BOMBS = ['2^31 frames in one entry of the time table', '2^31 frames in time and size table alike', '2^31 sizes announced, none held', '2^31 frames in a fragment that needs no table']

describe('a hostile film', () => {
  it.each(BOMBS)('[house.5] an MP4 that announces %s is refused within two seconds while the server keeps answering', async (name) => {
    const bytes = HOSTILE_FILMS[name]?.() ?? Buffer.alloc(0)
    expect(bytes.length).toBeGreaterThan(0)
    // The calmest of three: other programs on the machine hold a thread up now and then, a reading on it always would.
    const gaps: number[] = []
    const times: number[] = []
    for (let round = 0; round < 3; round++) {
      const startedAt = performance.now()
      gaps.push(await measureLongestGapMs(async () => {
        expect(await read(name, bytes)).toMatchObject({ kind: 'refused', reason: 'unreadable' })
      }))
      times.push(performance.now() - startedAt)
    }
    expect(Math.min(...times)).toBeLessThan(2000)
    expect(Math.min(...gaps)).toBeLessThan(200)
  })

  it('[house.5] the gauge of the test above does see a server that is held up', async () => {
    const gapMs = await measureLongestGapMs(async () => {
      await new Promise(resolve => setTimeout(resolve, 20))
      const until = performance.now() + 250
      while (performance.now() < until);
    })
    expect(gapMs).toBeGreaterThan(200)
  })

  it('the film they are made from is taken', async () => {
    expect(await read('sound', movie())).toMatchObject({ kind: 'accepted', film: { frameCount: 30, durationMs: 1000 } })
  })

  // In this thread, to spare sixty workers their start; what is refused here never comes to tax a worker's limits.
  it.each(Object.keys(HOSTILE_FILMS))('is refused: %s', async (name) => {
    const bytes = HOSTILE_FILMS[name]?.() ?? Buffer.alloc(0)
    const answer = await answerTask(new RangeReader({ url: store.put(name, bytes), bytes: bytes.length }))
    expect(answer).toMatchObject({ kind: 'read', reading: { kind: 'refused', reason: expect.stringMatching(/^(?:unreadable|not-video)$/) } })
  })

  it('is refused: a file without a byte', async () => {
    expect(await read('empty', Buffer.alloc(0))).toMatchObject({ kind: 'refused', reason: 'not-video' })
  })

  it('is refused, or is a film that keeps every rule, wherever a sound one is damaged', async () => {
    const random = createRandom(20260521)
    const films = ['plain-30.mp4', 'b-frames.mp4', 'fragmented.mp4', 'uneven.mov', 'place-in-keys.mov', 'vp9.webm', 'live.webm'].map(readMadeFilm)
    const seen = { accepted: 0, refused: 0 }
    for (let round = 0; round < 500; round++) {
      const bytes = damage(films[round % films.length] ?? Buffer.alloc(0), random)
      const answer = await answerTask(new RangeReader({ url: store.put('damaged', bytes), bytes: bytes.length }))
      if (answer.kind !== 'read')
        throw new Error(`round ${round}: ${answer.message}`)
      seen[answer.reading.kind]++
      if (answer.reading.kind === 'accepted')
        expectRules(answer.reading.film)
    }
    expect(seen.accepted).toBeGreaterThan(10)
    expect(seen.refused).toBeGreaterThan(100)
  }, 60_000)

  it('[house.5] takes no more memory than an ordinary one, eight at once', async () => {
    const bytes = HOSTILE_FILMS['2^31 frames in time and size table alike']?.() ?? Buffer.alloc(0)
    await read('warm', bytes)
    const before = process.memoryUsage().rss
    let most = before
    const timer = setInterval(() => most = Math.max(most, process.memoryUsage().rss), 5)
    await Promise.all(Array.from({ length: 8 }, (_, index) => read(`again-${index}`, bytes)))
    clearInterval(timer)
    expect(most - before).toBeLessThan(150 * 1024 * 1024)
  }, 30_000)
})

/** mulberry32: the same damage in every run. */
function createRandom(seed: number): () => number {
  let state = seed
  return () => {
    state = state + 0x6D2B79F5 | 0
    let mixed = Math.imul(state ^ state >>> 15, 1 | state)
    mixed = mixed + Math.imul(mixed ^ mixed >>> 7, 61 | mixed) ^ mixed
    return ((mixed ^ mixed >>> 14) >>> 0) / 2 ** 32
  }
}

/** One to four fields of four bytes overwritten with what hurts most, half of them in the index, and now and then an end cut off. */
function damage(film: Buffer, random: () => number): Buffer {
  const bytes = Buffer.from(film)
  const indexAt = Math.max(0, bytes.indexOf('moov'))
  const worst = [0, 1, 8, 0x7FFFFFFF, 0x80000000, 0xFFFFFFFF]
  for (let field = 0; field <= random() * 4; field++) {
    const from = random() < 0.5 ? indexAt : 0
    const at = from + Math.floor(random() * (bytes.length - from - 4))
    bytes.writeUInt32BE(worst[Math.floor(random() * 7)] ?? Math.floor(random() * 2 ** 32), at)
  }
  return random() < 0.1 ? bytes.subarray(0, Math.floor(random() * bytes.length)) : bytes
}

function expectRules(film: FilmFacts): void {
  expect(film.frameTicks.length).toBe(film.frameCount)
  expect(film.frameCount).toBeGreaterThan(1)
  expect(film.frameCount).toBeLessThanOrEqual(FILM_MAX_FRAME_COUNT)
  expect(film.frameTicks.every((tick, index) => Number.isSafeInteger(tick) && (index === 0 || tick > (film.frameTicks[index - 1] ?? tick)))).toBe(true)
  expect(film.durationMs).toBeLessThanOrEqual(FILM_MAX_DURATION_MS)
  expect(film.framesPerSecond).toBeGreaterThan(23)
  expect(film.hasSound || film.hasLocation).toBe(false)
}
