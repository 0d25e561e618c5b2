import { randomUUID } from 'node:crypto'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { sendClip, startDraft } from '#tests/support/path'
import type { PhotoOptions } from '#tests/support/photo'
import { sendPhoto } from '#tests/support/photo'
import { mismatches, readStore } from '#tests/support/store'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 42 })
})

afterAll(() => world.close())

function send(reviewId: string, bytes: Uint8Array, options: PhotoOptions = {}) {
  return sendPhoto(world, reviewId, { kind: 'ground_mark', bytes, ...options })
}

async function photo(width = 3000, height = 2000, background = '#3f7d20'): Promise<Buffer> {
  const picture = sharp({ create: { width, height, channels: 3, background } })
  return picture.withExif({ IFD0: { Make: 'Planted maker' }, IFD3: { GPSLatitude: '38/1 43/1 0/1' } }).jpeg().toBuffer()
}

async function sent(reviewId: string, options: PhotoOptions = {}): Promise<string> {
  const { body } = await send(reviewId, await photo(200, 150), options)
  return z.object({ id: z.string() }).parse(body).id
}

describe('a photograph beside the clips', () => {
  it('is made anew: at most 1600 pixels, WebP, without its tags, and shown with the review', async () => {
    const reviewId = await startDraft(world, 'student')
    const original = await photo()
    expect(original.includes('Planted maker')).toBe(true)
    const { status, body } = await send(reviewId, original, { kind: 'face_mark' })
    expect({ status, body }).toMatchObject({ status: 201, body: { kind: 'face_mark', widthPx: 1600, heightPx: 1067 } })
    expect((await call(world, 'GET', `/api/reviews/${reviewId}`, { as: 'student' })).body).toMatchObject({ photos: [body] })

    const { id } = z.object({ id: z.string() }).parse(body)
    const answer = await call(world, 'GET', `/api/photos/${id}/picture`, { as: 'student' })
    expect(answer.status).toBe(302)
    const stored = Buffer.from(await (await fetch(answer.headers.get('location') ?? '')).arrayBuffer())
    const { format, width, height, exif } = await sharp(stored).metadata()
    expect({ format, width, height, exif }).toEqual({ format: 'webp', width: 1600, height: 1067, exif: undefined })
    expect(stored.includes('Planted maker')).toBe(false)
  })

  it('keeps its size when it is small already', async () => {
    const reviewId = await startDraft(world, 'student')
    expect((await send(reviewId, await photo(300, 400))).body).toMatchObject({ widthPx: 300, heightPx: 400 })
  })

  it('is seen by those who see the review', async () => {
    const reviewId = await startDraft(world, 'student')
    const path = `/api/photos/${await sent(reviewId)}/picture`
    for (const as of ['student2', 'coach', 'owner', 'guardian'] as const) expect((await call(world, 'GET', path, { as })).status).toBe(404)
    expect((await call(world, 'GET', path)).status).toBe(401)
    await sendClip(world, 'student', reviewId)
    expect((await call(world, 'POST', `/api/reviews/${reviewId}/submit`, { as: 'student', body: {} })).status).toBe(200)
    for (const as of ['student', 'coach', 'owner'] as const) expect((await call(world, 'GET', path, { as })).status).toBe(302)
    expect((await call(world, 'GET', path, { as: 'student2' })).status).toBe(404)
    expect((await call(world, 'GET', `/api/reviews/${reviewId}`, { as: 'coach' })).body).toMatchObject({ photos: [{ kind: 'ground_mark' }] })
  })

  it('stays as it is once the review was sent', async () => {
    const reviewId = await startDraft(world, 'student')
    const id = await sent(reviewId)
    await sendClip(world, 'student', reviewId)
    await call(world, 'POST', `/api/reviews/${reviewId}/submit`, { as: 'student', body: {} })
    expect(await send(reviewId, await photo(200, 150))).toMatchObject({ status: 409, body: { data: { code: 'wrong-moment' } } })
    expect(await call(world, 'DELETE', `/api/photos/${id}`, { as: 'student' })).toMatchObject({ status: 409, body: { data: { code: 'wrong-moment' } } })
    expect((await call(world, 'GET', `/api/photos/${id}/picture`, { as: 'student' })).status).toBe(302)
  })

  it('is gone from the store when it is taken away, by its own student alone', async () => {
    const reviewId = await startDraft(world, 'student')
    const id = await sent(reviewId)
    expect((await call(world, 'DELETE', `/api/photos/${id}`, { as: 'student2' })).status).toBe(404)
    const address = (await call(world, 'GET', `/api/photos/${id}/picture`, { as: 'student' })).headers.get('location') ?? ''
    expect(await call(world, 'DELETE', `/api/photos/${id}`, { as: 'student' })).toMatchObject({ status: 200, body: { ok: true } })
    expect((await fetch(address)).status).toBe(404)
    expect((await call(world, 'DELETE', `/api/photos/${id}`, { as: 'student' })).status).toBe(404)
  })

  it('there are six to a review, and what is refused leaves nothing behind', async () => {
    const reviewId = await startDraft(world, 'student')
    expect((await send(reviewId, new Uint8Array(0))).status).toBe(415)
    // At once, so that each finds room before the others are written down.
    const small = await photo(120, 90)
    const answers = await Promise.all(Array.from({ length: 9 }, () => send(reviewId, small)))
    expect(answers.filter(({ status }) => status === 201)).toHaveLength(6)
    expect(answers.filter(({ status }) => status === 409).map(({ body }) => body)).toEqual(Array.from({ length: 3 }, () => expect.objectContaining({ data: expect.objectContaining({ code: 'too-many-photos' }) })))
    expect((await readStore(world)).objects.filter(({ key }) => key.startsWith(`photos/${reviewId}/`))).toHaveLength(6)
    expect(await mismatches(world)).toEqual([])
  })

  it('sent again with the same key it is one photograph, though the browser makes another boundary', async () => {
    const reviewId = await startDraft(world, 'student')
    const bytes = await photo(200, 150)
    const key = randomUUID()
    const first = await send(reviewId, bytes, { key })
    expect(await send(reviewId, bytes, { key })).toEqual(first)
    expect((await call(world, 'GET', `/api/reviews/${reviewId}`, { as: 'student' })).body).toMatchObject({ photos: [first.body] })
    expect(await send(reviewId, await photo(201, 150), { key })).toMatchObject({ status: 409, body: { data: { code: 'key-used-before' } } })
    expect(await send(reviewId, bytes, { key, kind: 'grip' })).toMatchObject({ status: 409, body: { data: { code: 'key-used-before' } } })
  })

  it('is judged by what it holds', async () => {
    const reviewId = await startDraft(world, 'student')
    const page = new Uint8Array(Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>'))
    expect(await send(reviewId, page)).toMatchObject({ status: 415, body: { data: { code: 'not-a-picture' } } })
    expect(await send(reviewId, await photo(8000, 5001))).toMatchObject({ status: 422, body: { data: { code: 'too-many-pixels', fields: { photo: expect.any(String) } } } })
    expect(await send(reviewId, await photo(200, 150), { field: 'picture' })).toMatchObject({ status: 422, body: { data: { fields: { photo: expect.any(String) } } } })
    expect(await send(reviewId, await photo(200, 150), { kind: 'ball' })).toMatchObject({ status: 422, body: { data: { fields: { kind: expect.any(String) } } } })
    expect(await send(reviewId, new Uint8Array(17 * 1024 * 1024))).toMatchObject({ status: 413, body: { data: { code: 'too-large' } } })
    expect(await call(world, 'POST', `/api/reviews/${reviewId}/photos?kind=grip`, { as: 'student', body: {} })).toMatchObject({ status: 400, body: { data: { code: 'not-a-form' } } })
  })

  it('of a junior needs a consent that is alive, to send it and to see it', async () => {
    const reviewId = await startDraft(world, 'junior')
    const id = await sent(reviewId, { as: 'junior' })
    expect((await call(world, 'GET', `/api/photos/${id}/picture`, { as: 'guardian' })).status).toBe(302)
    arrange(world, database => database.prepare('update consents set withdrawn_at_ms = 1').run())
    expect(await send(reviewId, await photo(200, 150), { as: 'junior' })).toMatchObject({ status: 403, body: { data: { code: 'consent-needed' } } })
    expect(await call(world, 'GET', `/api/photos/${id}/picture`, { as: 'guardian' })).toMatchObject({ status: 403, body: { data: { code: 'consent-needed' } } })
  })
})
