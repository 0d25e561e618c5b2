import type { RangeServer } from '#tests/support/film/range-server'
import type { BuiltWorker } from '#tests/support/film/worker'
import { writeFile } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest'
import { readFilm } from '#server/features/film/reading/read-film'
import { FilmReaderBroken, StoreUnreachable } from '#server/features/film/reading/reading.errors'
import { readMadeFilm } from '#tests/support/film/films'
import { startRangeServer } from '#tests/support/film/range-server'
import { buildWorkerForTest } from '#tests/support/film/worker'

const film = readMadeFilm('plain-30.mp4')
let store: RangeServer
let worker: BuiltWorker

beforeAll(async () => {
  store = await startRangeServer()
  worker = await buildWorkerForTest()
}, 60_000)

afterEach(() => {
  store.fault = undefined
})

afterAll(async () => {
  await store.close()
  await worker.remove()
})

function read(options: { bytes?: number, timeLimitMs?: number, workerPath?: string } = {}) {
  return readFilm({ url: store.put('film.mp4', film), bytes: film.length, workerPath: worker.path, ...options })
}

/** A worker of another kind, to see what becomes of one that misbehaves after it has started. */
async function writeWorker(name: string, code: string): Promise<string> {
  const path = join(dirname(worker.path), `${name}.mjs`)
  const start = 'import { parentPort, workerData } from "node:worker_threads"\nAtomics.store(new Int32Array(workerData.signal), 0, 1)\n'
  await writeFile(path, start + code)
  return path
}

describe('a store that fails is told apart from a film that fails', () => {
  it.each([
    ['answers 503', { status: 503 }],
    ['answers 500', { status: 500 }],
    ['has lost the object', { status: 404 }],
    ['no longer takes the address', { status: 403 }],
    ['breaks off in the middle', 'cut'],
    ['does not know ranges', 'ignore-ranges'],
  ] as const)('when it %s', async (_, fault) => {
    store.fault = fault
    await expect(read()).rejects.toThrow(StoreUnreachable)
    store.fault = undefined
    expect(await read()).toMatchObject({ kind: 'accepted' })
  })

  it('when it hangs until the time is up', async () => {
    store.fault = 'hang'
    await expect(read({ timeLimitMs: 700 })).rejects.toThrow(StoreUnreachable)
  })

  it('when nobody listens', async () => {
    const other = await startRangeServer()
    const url = other.put('film.mp4', film)
    await other.close()
    await expect(readFilm({ url, bytes: film.length, workerPath: worker.path })).rejects.toThrow(StoreUnreachable)
  })

  it('but a file of another size than announced is the file\'s fault', async () => {
    expect(await read({ bytes: film.length + 100 })).toMatchObject({ reason: 'unreadable' })
    expect(await read({ bytes: film.length - 100 })).toMatchObject({ reason: 'unreadable' })
  })
})

describe('a worker that misbehaves', () => {
  it('fills its heap: the film is refused and this process lives on', async () => {
    const workerPath = await writeWorker('hoarder', 'const kept = []\nfor (;;) kept.push({ at: kept.length, more: [kept.length] })')
    expect(await read({ workerPath })).toMatchObject({ kind: 'refused', reason: 'unreadable', detail: expect.stringContaining('memory') })
  }, 30_000)

  it('never comes to an end: the film took too long', async () => {
    const workerPath = await writeWorker('circle', 'for (;;);')
    expect(await read({ workerPath, timeLimitMs: 300 })).toMatchObject({ kind: 'refused', reason: 'took-too-long' })
  })

  it.each([
    ['throws', 'throw new Error("broken")'],
    ['leaves', 'process.exit(3)'],
    ['says nothing', ''],
  ])('%s: the film cannot be read', async (name, code) => {
    const workerPath = await writeWorker(name.replace(' ', '-'), code)
    expect(await read({ workerPath })).toMatchObject({ kind: 'refused', reason: 'unreadable' })
  })

  it('is missing: that is no fault of the film', async () => {
    await expect(read({ workerPath: join(dirname(worker.path), 'missing.mjs') })).rejects.toThrow(FilmReaderBroken)
  })

  it('sees no settings of the server', async () => {
    const workerPath = await writeWorker('spy', 'throw new Error(`sees ${Object.keys(process.env).length} settings`)')
    expect(await read({ workerPath })).toMatchObject({ detail: 'sees 0 settings' })
  })
})

describe('many films at once', () => {
  it('are read two at a time, and all of them', async () => {
    const own = await startRangeServer()
    let release = () => {}
    own.hold = new Promise<void>(resolve => release = resolve)
    const answers = Promise.all(Array.from({ length: 5 }, (_, index) =>
      readFilm({ url: own.put(`film-${index}`, film), bytes: film.length, workerPath: worker.path })))
    await vi.waitFor(() => expect(own.maxOpen()).toBe(2), 10_000)
    // Time for a third to come, were it let in.
    await new Promise(resolve => setTimeout(resolve, 500))
    expect(own.maxOpen()).toBe(2)
    release()
    expect((await answers).map(reading => reading.kind)).toEqual(Array.from({ length: 5 }, () => 'accepted'))
    expect(own.maxOpen()).toBe(2)
    await own.close()
  }, 20_000)
})
