import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import type { DemoKey } from '#fakes/demo/people'
import { call } from '#tests/support/call'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 21 })
})
afterAll(() => world.close())

const MEGABYTE = 1024 * 1024

/** As a page sends it: the browser makes the form and its boundary. */
async function sendPicture(as: DemoKey, bytes: Uint8Array<ArrayBuffer>, { field = 'picture', name = 'me.jpg' } = {}) {
  const body = new FormData()
  body.append(field, new Blob([bytes], { type: 'image/jpeg' }), name)
  const response = await fetch(`${world.url}/api/account/picture`, {
    method: 'PUT', body, headers: { 'sec-fetch-site': 'same-origin', 'cookie': world.cookie(as) },
  })
  const answer: unknown = await response.json()
  return { status: response.status, body: answer }
}

async function picture(width = 700, height = 500): Promise<Uint8Array<ArrayBuffer>> {
  return new Uint8Array(await sharp({ create: { width, height, channels: 3, background: '#1b4b8f' } }).jpeg().toBuffer())
}

async function idOf(as: DemoKey): Promise<string> {
  return z.object({ id: z.string() }).parse((await call(world, 'GET', '/api/account', { as })).body).id
}

describe('a profile picture over HTTP', () => {
  it('is made anew, kept in the store, and shown by an address of a few minutes', async () => {
    expect(await sendPicture('coach', await picture())).toMatchObject({ status: 200, body: { hasPicture: true } })
    const answer = await call(world, 'GET', `/api/people/${await idOf('coach')}/picture`, { as: 'student' })
    expect(answer.status).toBe(302)
    expect(answer.headers.get('cache-control')).toBe('private, max-age=60')
    const address = answer.headers.get('location') ?? ''
    expect(new URL(address).port).toBe(String(world.addresses.storagePort))
    const stored = await fetch(address)
    expect(await sharp(Buffer.from(await stored.arrayBuffer())).metadata()).toMatchObject({ format: 'webp', width: 512, height: 512 })
  })

  it('is gone from the store when it is taken away', async () => {
    await sendPicture('coach2', await picture())
    const path = `/api/people/${await idOf('coach2')}/picture`
    const address = (await call(world, 'GET', path, { as: 'student' })).headers.get('location') ?? ''
    expect((await call(world, 'DELETE', '/api/account/picture', { as: 'coach2' })).body).toMatchObject({ hasPicture: false })
    expect((await fetch(address)).status).toBe(404)
    expect((await call(world, 'GET', path, { as: 'student' })).status).toBe(404)
  })

  it('is seen by those who may see the person, and is not there for others', async () => {
    await sendPicture('student', await picture())
    const path = `/api/people/${await idOf('student')}/picture`
    for (const as of ['student', 'coach', 'owner'] as const) expect((await call(world, 'GET', path, { as })).status).toBe(302)
    for (const as of ['student2', 'guardian', 'junior'] as const) expect((await call(world, 'GET', path, { as })).status).toBe(404)
    expect((await call(world, 'GET', path)).status).toBe(401)
  })

  it('may have eight megabytes and no more', async () => {
    const trailed = new Uint8Array(8 * MEGABYTE)
    trailed.set(await picture())
    expect((await sendPicture('student', trailed)).status).toBe(200)
    expect(await sendPicture('student', new Uint8Array(8 * MEGABYTE + 1))).toMatchObject({ status: 413, body: { data: { code: 'too-large' } } })
    expect(await sendPicture('student', new Uint8Array(9 * MEGABYTE))).toMatchObject({ status: 413, body: { data: { code: 'too-large' } } })
  })

  it('is judged by what it holds, not by its name', async () => {
    const page = new Uint8Array(Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>'))
    expect(await sendPicture('student', page)).toMatchObject({ status: 415, body: { data: { code: 'not-a-picture' } } })
    expect((await sendPicture('student', await picture(), { name: '../../../etc/passwd.html' })).status).toBe(200)
    expect(await sendPicture('student', await picture(), { field: 'avatar' })).toMatchObject({ status: 422, body: { data: { fields: { picture: expect.any(String) } } } })
    expect(await sendPicture('student', await picture(8000, 5001))).toMatchObject({ status: 422, body: { data: { code: 'too-many-pixels' } } })
  })

  it('cannot be sent as anything but a form', async () => {
    const json = await call(world, 'PUT', '/api/account/picture', { as: 'student', body: {} })
    expect(json.body).toMatchObject({ statusCode: 400, data: { code: 'not-a-form' } })
    const cut = await call(world, 'PUT', '/api/account/picture', {
      as: 'student', rawBody: '--edge\r\nContent-Disposition: form-data; name="picture"; filename="a"\r\n', headers: { 'content-type': 'multipart/form-data; boundary=edge' },
    })
    expect(cut.body).toMatchObject({ statusCode: 400, data: { code: 'not-a-form' } })
  })
})
