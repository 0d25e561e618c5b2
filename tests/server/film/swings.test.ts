import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { idOf, sendClip, startDraft, submitted, uploadClip } from '#tests/support/path'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World
let reviewId: string
let clipId: string

beforeAll(async () => {
  world = await startWorld({ index: 41 })
  reviewId = await startDraft(world, 'student')
  // plain-30.mp4 lasts two seconds.
  clipId = idOf(await sendClip(world, 'student', reviewId))
})

afterAll(() => world.close())

const UNKNOWN = { contact: null, flight: null, carryM: null, surface: null }
const FIRST = { fromMs: 0, toMs: 800, contact: 'fat', flight: { start: 'left', curve: 'straight', height: 'low' }, carryM: 92.5, surface: 'grass' }
const SECOND = { fromMs: 800, toMs: 2000, ...UNKNOWN }

const clipSchema = z.object({ swings: z.array(z.object({ id: z.string(), number: z.number() })) })

function put(swings: unknown, id = clipId) {
  return call(world, 'PUT', `/api/clips/${id}/swings`, { as: 'student', body: { swings } })
}

describe('the swings of a clip', () => {
  it('an accepted clip is one swing until more is said', async () => {
    const id = idOf(await sendClip(world, 'student', await startDraft(world, 'student')))
    const { body } = await call(world, 'POST', `/api/clips/${id}/complete`, { as: 'student', body: {} })
    expect(body).toMatchObject({ state: 'accepted', durationMs: 2000, swings: [{ number: 1, fromMs: 0, toMs: 2000, ...UNKNOWN }] })
  })

  it('are kept with what each ball did, and shown with the review', async () => {
    const swings = [{ number: 1, ...FIRST }, { number: 2, ...SECOND }]
    expect(await put([FIRST, SECOND])).toMatchObject({ status: 200, body: { id: clipId, swings } })
    expect((await call(world, 'GET', `/api/reviews/${reviewId}`, { as: 'student' })).body).toMatchObject({ clips: [{ id: clipId, swings }] })
  })

  it('keep their ids by number, since marks will belong to them', async () => {
    const before = clipSchema.parse((await put([FIRST, SECOND])).body).swings
    const shorter = clipSchema.parse((await put([{ ...FIRST, toMs: 700 }])).body).swings
    expect(shorter).toEqual([expect.objectContaining({ id: before[0]?.id, number: 1 })])
    const again = clipSchema.parse((await put([FIRST, SECOND])).body).swings
    expect(again[0]?.id).toBe(before[0]?.id)
    expect(again[1]?.id).not.toBe(before[1]?.id)
  })

  it('six fit in a clip', async () => {
    const six = Array.from({ length: 6 }, (_, index) => ({ fromMs: index * 300, toMs: index * 300 + 300, ...UNKNOWN }))
    expect(await put(six)).toMatchObject({ status: 200, body: { swings: six } })
    expect(await put([...six, { fromMs: 1800, toMs: 1900, ...UNKNOWN }])).toMatchObject({ status: 422, body: { data: { fields: { swings: expect.stringContaining('at most 6') } } } })
  })

  it.each([
    [[], 'swings'],
    [[{ ...FIRST, toMs: 0 }], 'swings.0.toMs'],
    [[{ ...FIRST, fromMs: -1 }], 'swings.0.fromMs'],
    [[{ ...FIRST, fromMs: 0.5 }], 'swings.0.fromMs'],
    [[FIRST, { ...SECOND, fromMs: 799 }], 'swings.1.fromMs'],
    [[SECOND, FIRST], 'swings.1.fromMs'],
    [[FIRST, { ...SECOND, toMs: 2001 }], 'swings.1.toMs'],
    [[{ ...FIRST, contact: 'heavy' }], 'swings.0.contact'],
    [[{ ...FIRST, flight: { start: 'left' } }], 'swings.0.flight.curve'],
    [[{ ...FIRST, carryM: 451 }], 'swings.0.carryM'],
    [[{ ...FIRST, surface: 'water' }], 'swings.0.surface'],
    [[{ fromMs: 0, toMs: 10 }], 'swings.0.contact'],
  ])('what cannot be is refused by name (%#)', async (swings, field) => {
    const before = (await put([FIRST, SECOND])).body
    expect(await put(swings)).toMatchObject({ status: 422, body: { data: { fields: { [field]: expect.any(String) } } } })
    expect((await call(world, 'POST', `/api/clips/${clipId}/complete`, { as: 'student', body: {} })).body).toEqual(before)
  })

  it('wait for the clip to be read', async () => {
    const { clipId: sending } = await uploadClip(world, 'student', await startDraft(world, 'student'))
    expect(await put([FIRST], sending)).toMatchObject({ status: 409, body: { data: { code: 'clip-not-ready' } } })
  })

  it('stay as they are once the review was sent, and can be told again while new film is awaited', async () => {
    const { id, clipId: sent } = await submitted(world, 'student')
    expect(await put([FIRST], sent)).toMatchObject({ status: 409, body: { data: { code: 'wrong-moment' } } })
    arrange(world, database => database.prepare('update reviews set state = \'new_film\', state_before_new_film = \'waiting\' where id = ?').run(id))
    expect((await put([FIRST], sent)).status).toBe(200)
  })

  it('are told by their own student alone', async () => {
    const { clipId: theirs } = await submitted(world, 'student2')
    expect((await put([FIRST], theirs)).status).toBe(404)
  })
})

describe('what is said of a clip when it is begun', () => {
  async function begin(change: Record<string, unknown>) {
    return call(world, 'POST', `/api/reviews/${await startDraft(world, 'student')}/clips`, {
      as: 'student', body: { view: 'face_on', fileName: 'swing.mp4', bytes: 100, contentType: 'video/mp4', ...change },
    })
  }

  it('is kept with it', async () => {
    expect(await begin({ captureFramesPerSecond: 240, preparedAs: 're_encoded' })).toMatchObject({ status: 201, body: { clip: { captureFramesPerSecond: 240, preparedAs: 're_encoded', swings: [] } } })
    expect(await begin({})).toMatchObject({ status: 201, body: { clip: { captureFramesPerSecond: null, preparedAs: null } } })
  })

  it.each([[{ captureFramesPerSecond: 0 }], [{ captureFramesPerSecond: 1001 }], [{ captureFramesPerSecond: '240' }], [{ preparedAs: 'zipped' }]])('must be possible (%#)', async (change) => {
    expect((await begin(change)).status).toBe(422)
  })
})
