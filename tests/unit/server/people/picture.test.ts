import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import sharp from 'sharp'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { RunningStorage } from '#fakes/storage/server'
import { startStorage } from '#fakes/storage/server'
import { makePicture } from '#server/features/people/picture'
import { changePicture, getPictureAddress, removePicture } from '#server/features/people/picture.service'
import type { House } from './open-house'
import { openHouse } from './open-house'

const RED = { r: 200, g: 30, b: 30 }
const BLUE = { r: 30, g: 30, b: 200 }

function plain(width: number, height: number, background = RED) {
  return sharp({ create: { width, height, channels: 3, background } })
}

const notAPicture = { kind: 'wrong-kind', code: 'not-a-picture' }

describe('making a picture', () => {
  it.each(['jpeg', 'png', 'webp'] as const)('makes a square WebP of 512 pixels from a %s', async (format) => {
    const made = await makePicture(await plain(900, 300).toFormat(format).toBuffer())
    expect(await sharp(made).metadata()).toMatchObject({ format: 'webp', width: 512, height: 512 })
  })

  it('keeps nothing of where, when and with what it was taken', async () => {
    const tagged = await plain(600, 600).withExif({ IFD0: { Make: 'Planted maker' }, IFD3: { GPSLatitude: '38/1 43/1 0/1' } }).jpeg().toBuffer()
    expect((await sharp(tagged).metadata()).exif?.includes('Planted maker')).toBe(true)
    const made = await makePicture(tagged)
    expect((await sharp(made).metadata()).exif).toBeUndefined()
    expect(made.includes('Planted maker')).toBe(false)
  })

  it('stands upright when the camera lay on its side', async () => {
    // The left half red, the right half blue; turned by a quarter, red is on top.
    const sideways = await plain(600, 600, BLUE)
      .composite([{ input: await plain(300, 600).png().toBuffer(), left: 0, top: 0 }])
      .withMetadata({ orientation: 6 }).jpeg().toBuffer()
    const { data, info } = await sharp(await makePicture(sideways)).raw().toBuffer({ resolveWithObject: true })
    const redAt = (x: number, y: number) => data[(y * info.width + x) * info.channels] ?? 0
    expect(redAt(256, 40)).toBeGreaterThan(150)
    expect(redAt(256, 470)).toBeLessThan(80)
  })

  it('is the first frame of what moves', async () => {
    const frames = await Promise.all([RED, BLUE].map(colour => plain(64, 64, colour).png().toBuffer()))
    const moving = await sharp(frames, { join: { animated: true } }).webp({ loop: 0, delay: [100, 100], lossless: true }).toBuffer()
    expect((await sharp(moving, { pages: -1 }).metadata()).pages).toBe(2)
    const made = await makePicture(moving)
    expect((await sharp(made, { pages: -1 }).metadata()).pages ?? 1).toBe(1)
    const { dominant } = await sharp(made).stats()
    expect(dominant.r).toBeGreaterThan(dominant.b)
  })

  const svg = '<svg xmlns="http://www.w3.org/2000/svg" width="9" height="9"><rect width="9" height="9"/></svg>'
  it.each([
    ['nothing', async () => Buffer.alloc(0)],
    ['text', async () => Buffer.from('This is not a picture at all.')],
    ['a drawing that can hold programs', async () => Buffer.from(svg)],
    ['a moving picture of another kind', async () => plain(64, 64).gif().toBuffer()],
    ['another format that decoders read', async () => plain(64, 64).tiff().toBuffer()],
    ['a page with the beginning of a picture', async () => Buffer.concat([Buffer.from([0xff, 0xd8, 0xff]), Buffer.from('<script>alert(1)</script>')])],
    ['half a picture', async () => (await plain(400, 400).png({ compressionLevel: 0 }).toBuffer()).subarray(0, 3000)],
    ['a RIFF file that is a sound', async () => Buffer.from('RIFF\x24\x00\x00\x00WAVEfmt ')],
  ])('refuses %s', async (_what, make) => {
    await expect(makePicture(await make())).rejects.toMatchObject(notAPicture)
  })

  it('refuses more than 40 million pixels before it unpacks them', async () => {
    const huge = await plain(8000, 5001).png().toBuffer()
    await expect(makePicture(huge)).rejects.toMatchObject({ kind: 'invalid', code: 'too-many-pixels' })
  })
})

describe('one\'s own picture', () => {
  let house: House
  let store: RunningStorage
  let dataDir: string
  let joelId: string

  beforeEach(async () => {
    dataDir = await mkdtemp(join(tmpdir(), 'turfnote-pictures-'))
    store = await startStorage({ port: 0, dataDir, bucket: 'film', region: 'eu-test-1', accessKey: 'TESTKEY', secretKey: 'test-secret' })
    house = await openHouse({ storageUrl: store.url })
    joelId = await house.addPerson({ email: 'joel@northfield.test' })
  })
  afterEach(async () => {
    await house.close()
    await store.close()
    await rm(dataDir, { recursive: true })
  })

  const upload = async (colour = RED) => [{ field: 'picture', bytes: await plain(600, 600, colour).png().toBuffer() }]
  const fetchStatus = async (url: string) => (await fetch(url)).status

  it('is stored under a name of ours and read by an address that the store signs', async () => {
    const ctx = await house.signedInCtx(joelId)
    expect(await changePicture(ctx, await upload())).toMatchObject({ hasPicture: true })
    const url = await getPictureAddress(ctx, joelId)
    expect(new URL(url).pathname).toMatch(/^\/film\/pictures\/[0-9a-f-]{36}\.webp$/)
    expect(new URL(url).searchParams.get('X-Amz-Expires')).toBe('300')
    const response = await fetch(url)
    expect(response.headers.get('content-type')).toBe('image/webp')
    expect(await sharp(Buffer.from(await response.arrayBuffer())).metadata()).toMatchObject({ format: 'webp', width: 512 })
  })

  it('leaves nothing of the one before, nor of one that is taken away', async () => {
    const ctx = await house.signedInCtx(joelId)
    await changePicture(ctx, await upload())
    const first = await getPictureAddress(ctx, joelId)
    await changePicture(ctx, await upload(BLUE))
    const second = await getPictureAddress(ctx, joelId)
    expect([await fetchStatus(first), await fetchStatus(second)]).toEqual([404, 200])
    expect(await removePicture(ctx)).toMatchObject({ hasPicture: false })
    expect(await fetchStatus(second)).toBe(404)
    await expect(getPictureAddress(ctx, joelId)).rejects.toMatchObject({ kind: 'not-found' })
    expect(await removePicture(ctx)).toMatchObject({ hasPicture: false })
  })

  it('stays as it was when the new one is no picture, or came under another name', async () => {
    const ctx = await house.signedInCtx(joelId)
    await changePicture(ctx, await upload())
    const address = await getPictureAddress(ctx, joelId)
    await expect(changePicture(ctx, [{ field: 'picture', bytes: Buffer.from('no') }])).rejects.toMatchObject(notAPicture)
    await expect(changePicture(ctx, [{ ...(await upload())[0], field: 'file', bytes: Buffer.from('x') }])).rejects.toMatchObject({ fields: { picture: expect.any(String) } })
    expect(await fetchStatus(address)).toBe(200)
  })

  it('is not changed while the store is down, and the words say so', async () => {
    await store.close()
    await expect(changePicture(await house.signedInCtx(joelId), await upload())).rejects.toMatchObject({ kind: 'unavailable', code: 'store-unavailable' })
    expect(await house.db.selectFrom('users').select('picture_key').execute()).toEqual([{ picture_key: null }])
    store = await startStorage({ port: 0, dataDir, bucket: 'film', region: 'eu-test-1', accessKey: 'TESTKEY', secretKey: 'test-secret' })
  })
})

describe('who may see a picture', () => {
  let house: House
  const ids: Record<string, string> = {}

  beforeEach(async () => {
    house = await openHouse()
    for (const role of ['student', 'guardian', 'coach', 'owner'] as const) {
      ids[role] = await house.addPerson({ email: `${role}@northfield.test`, role })
      ids[`other ${role}`] = await house.addPerson({ email: `other-${role}@northfield.test`, role })
    }
    ids.junior = await house.addPerson({ email: 'junior@northfield.test' })
    await house.db.updateTable('users').set({ picture_key: 'pictures/x.webp' }).execute()
    await house.db.insertInto('guardianships').values({ guardian_id: id('guardian'), junior_id: id('junior'), created_at_ms: 0, ended_at_ms: null }).execute()
  })
  afterEach(() => house.close())

  function id(who: string): string {
    return ids[who] ?? who
  }

  async function sees(viewer: string, person: string): Promise<boolean> {
    return getPictureAddress(await house.signedInCtx(id(viewer)), id(person)).then(() => true, (error: unknown) => {
      expect(error).toMatchObject({ kind: 'not-found' })
      return false
    })
  }

  it.each([
    ['student', 'student', true], ['student', 'other student', false], ['student', 'coach', true], ['student', 'owner', true],
    ['student', 'guardian', false], ['student', 'junior', false], ['junior', 'guardian', true], ['junior', 'other guardian', false],
    ['guardian', 'junior', true], ['guardian', 'student', false], ['other guardian', 'junior', false], ['guardian', 'coach', true],
    ['coach', 'student', true], ['coach', 'junior', true], ['coach', 'other coach', true], ['owner', 'student', true], ['owner', 'guardian', true],
    ['owner', '0196f0a2-7c11-7b52-9d0e-3f4f5b8a1c22', false],
  ])('%s, of %s: %s', async (viewer, person, isSeen) => {
    expect(await sees(viewer, person)).toBe(isSeen)
  })

  it('ends with the guardianship, for both', async () => {
    await house.db.updateTable('guardianships').set({ ended_at_ms: 1 }).execute()
    expect([await sees('guardian', 'junior'), await sees('junior', 'guardian')]).toEqual([false, false])
  })
})
