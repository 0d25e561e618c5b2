import { createHash } from 'node:crypto'
import { rmSync } from 'node:fs'
import type { Browser, BrowserContext, Locator, Page } from '@playwright/test'
import { expect, test } from '@playwright/test'
import { z } from 'zod'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { startDraft } from '#tests/support/path'
import { call } from '#tests/support/call'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import { PHONE } from '../worlds'
import { makePaddedFilm, sha256OfFile } from './film'
import type { Line } from './line'
import { watchLine } from './line'

/** 15 parts of 8 MiB, the last one short. */
const LONG = { bytes: 120_000_000, partCount: 15 }
/** 8 parts. */
const SHORT = { bytes: 64_000_000, partCount: 8 }
const AT_ONCE = 3
/** A good phone line: slow enough that there is a middle to break off in. */
const LINE_BYTES_A_SECOND = 16_000_000
const FOLDER = '.test/padded-film'

const FIRST_INDEX = 50
let world: World
let long: string
let short: string
let line: Line

// One after the other: each measures a line that another would share.
test.describe.configure({ mode: 'default' })
test.setTimeout(120_000)

test.beforeAll(async ({}, info) => { // eslint-disable-line no-empty-pattern -- Playwright reads the names of the first argument
  world = await startWorld({ index: FIRST_INDEX + info.parallelIndex })
  long = await makePaddedFilm(`${FOLDER}-${info.parallelIndex}`, LONG.bytes)
  short = await makePaddedFilm(`${FOLDER}-${info.parallelIndex}`, SHORT.bytes)
})

test.afterAll(async ({}, info) => { // eslint-disable-line no-empty-pattern -- as above
  await world.close()
  rmSync(`${FOLDER}-${info.parallelIndex}`, { recursive: true, force: true })
})

test.beforeEach(() => {
  line = watchLine(world.addresses.storagePort)
})

test.afterEach(() => line.close())

async function signIn(browser: Browser): Promise<BrowserContext> {
  const context = await browser.newContext({ viewport: PHONE, baseURL: world.url, timezoneId: 'Europe/London' })
  const page = await context.newPage()
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill('student@demo.turfnote.test')
  await page.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).not.toHaveURL(/sign-in/)
  await page.close()
  return context
}

interface FilmStep {
  page: Page
  clip: Locator
  choose(path: string): Promise<void>
  /** The line of this page alone. */
  setLine(line: { offline: boolean }): Promise<void>
}

/** The film step of a draft, on a line of a known speed. */
async function openFilmStep(context: BrowserContext, draft: string): Promise<FilmStep> {
  const page = await context.newPage()
  const session = await context.newCDPSession(page)
  const setLine = async ({ offline }: { offline: boolean }) => {
    await session.send('Network.emulateNetworkConditions', { offline, latency: 20, downloadThroughput: -1, uploadThroughput: LINE_BYTES_A_SECOND })
  }
  await session.send('Network.enable')
  await setLine({ offline: false })
  await page.goto(`/reviews/new?draft=${draft}&step=film`)
  return { page, clip: clipOf(page), choose: path => page.getByLabel('Film or choose a clip, Face-on').setInputFiles(path), setLine }
}

const clipOf = (page: Page): Locator => page.getByRole('region', { name: 'Face-on clip' })

async function untilKept({ clip }: FilmStep): Promise<void> {
  await expect(clip).toContainText('You can close this page.', { timeout: 30_000 })
}

/** Until so many parts are in the store and the next ones are on their way. */
async function untilArrived(count: number): Promise<void> {
  await expect.poll(() => line.arrived().length >= count && line.underWay().length > 0, { timeout: 60_000, intervals: [20] }).toBe(true)
}

async function untilTaken(clip: Locator): Promise<void> {
  await expect(clip).toContainText('Taken.', { timeout: 60_000 })
}

const reviewSchema = z.object({ clips: z.array(z.object({ id: z.string(), state: z.string() })) })

/** SHA-256 of what the store holds of a draft's only clip. */
async function sha256InStore(draft: string): Promise<string> {
  const review = reviewSchema.parse((await call(world, 'GET', `/api/reviews/${draft}`, { as: 'student' })).body)
  expect(review.clips).toHaveLength(1)
  const film = await fetch(`${world.url}/api/clips/${review.clips[0]?.id}/film`, { headers: { cookie: world.cookie('student') } })
  return createHash('sha256').update(new Uint8Array(await film.arrayBuffer())).digest('hex')
}

/**
 * Every part came, and came again only after it was broken off on its way. The last try may be a broken one too: the store had the
 * part and only its answer was lost.
 */
function expectNothingInVain(partCount: number): void {
  const tries = new Map<number, string[]>()
  for (const { number, state } of line.puts) tries.set(number, [...tries.get(number) ?? [], state])
  expect(sorted([...tries.keys()])).toEqual(Array.from({ length: partCount }, (_, index) => index + 1))
  for (const [number, states] of tries) {
    expect(states.slice(0, -1), `part ${number} but for its last try`).toEqual(states.slice(1).map(() => 'broken'))
  }
}

const sorted = (numbers: readonly number[]): number[] => [...numbers].sort((a, b) => a - b)
const cameCount = (): number => new Set(line.puts.map(put => put.number)).size

test('[film.1] 120 MB over a line cut three times and a reload arrive byte for byte, and only parts under way are sent again', async ({ browser }) => {
  const context = await signIn(browser)
  const draft = await startDraft(world, 'student')
  const step = await openFilmStep(context, draft)
  await step.choose(long)
  await untilKept(step)

  await untilArrived(1)
  const first = line.cut()
  await untilArrived(4)
  const second = line.cut()
  await untilArrived(7)
  const brokenBefore = line.broken().length
  await step.page.reload()
  await untilArrived(10)
  const byReload = line.broken().slice(brokenBefore)
  const third = line.cut()
  await untilTaken(step.clip)

  expectNothingInVain(LONG.partCount)
  for (const event of [first, second, byReload, third]) {
    expect(event.length).toBeGreaterThanOrEqual(1)
    expect(event.length).toBeLessThanOrEqual(AT_ONCE)
  }
  expect(sorted(line.broken())).toEqual(sorted([...first, ...second, ...byReload, ...third]))
  expect(await sha256InStore(draft)).toBe(await sha256OfFile(long))
  await context.close()
})

test('[film.4] a line that goes away is waited for, and the film goes on by itself when it is back', async ({ browser }) => {
  const context = await signIn(browser)
  const draft = await startDraft(world, 'student')
  const step = await openFilmStep(context, draft)
  await step.choose(short)
  await untilArrived(2)
  await step.setLine({ offline: true })
  await expect(step.clip).toContainText('No connection at the moment.', { timeout: 20_000 })
  const count = line.puts.length
  await step.page.waitForTimeout(3000)
  expect(line.puts).toHaveLength(count)
  await step.setLine({ offline: false })
  await untilTaken(step.clip)
  expectNothingInVain(SHORT.partCount)
  expect(await sha256InStore(draft)).toBe(await sha256OfFile(short))
  await context.close()
})

test('[film.4] a closed page goes on when another page of the site is opened, without choosing the film again', async ({ browser }) => {
  const context = await signIn(browser)
  const draft = await startDraft(world, 'student')
  const step = await openFilmStep(context, draft)
  await step.choose(short)
  await untilKept(step)
  await untilArrived(2)
  await step.page.close()
  await expect.poll(() => line.underWay()).toEqual([])
  expect(cameCount()).toBeLessThan(SHORT.partCount)

  const other = await context.newPage()
  await other.goto('/reviews')
  await expect.poll(() => cameCount() === SHORT.partCount && line.underWay().length === 0, { timeout: 60_000 }).toBe(true)
  await other.goto(`/reviews/new?draft=${draft}&step=film`)
  await untilTaken(clipOf(other))
  expectNothingInVain(SHORT.partCount)
  expect(await sha256InStore(draft)).toBe(await sha256OfFile(short))
  await expect.poll(() => keptOn(other)).toEqual(NOTHING)
  await context.close()
})

test('[film.4] two windows do not send the same clip, and the second goes on when the first is closed', async ({ browser }) => {
  const context = await signIn(browser)
  const draft = await startDraft(world, 'student')
  const first = await openFilmStep(context, draft)
  await first.choose(long)
  await untilKept(first)
  const second = await openFilmStep(context, draft)
  await expect(second.clip).toContainText('Another window of this browser is sending it.')
  await untilArrived(4)
  expect(line.broken()).toEqual([])
  await first.page.close()
  await untilTaken(second.clip)
  expectNothingInVain(LONG.partCount)
  expect(await sha256InStore(draft)).toBe(await sha256OfFile(long))
  await context.close()
})

test('[film.4] a pause holds over a reload, and going on sends the rest', async ({ browser }) => {
  const context = await signIn(browser)
  const draft = await startDraft(world, 'student')
  const { page, clip, ...step } = await openFilmStep(context, draft)
  await step.choose(short)
  await untilArrived(2)
  await clip.getByRole('button', { name: 'Pause' }).click()
  await expect(clip).toContainText('Paused. What has arrived is kept.')
  await expect.poll(() => line.underWay()).toEqual([])
  await expect.poll(() => keptOn(page)).toMatchObject({ parts: SHORT.partCount })
  const count = line.puts.length
  await page.reload()
  await expect(clip).toContainText('Paused. What has arrived is kept.')
  await page.waitForTimeout(1500)
  expect(line.puts).toHaveLength(count)
  await clip.getByRole('button', { name: 'Go on' }).click()
  await untilTaken(clip)
  expectNothingInVain(SHORT.partCount)
  await context.close()
})

test('[film.4] giving up leaves nothing in the store and nothing on the device', async ({ browser }) => {
  const context = await signIn(browser)
  const draft = await startDraft(world, 'student')
  const step = await openFilmStep(context, draft)
  await step.choose(short)
  await untilKept(step)
  await untilArrived(2)
  await step.clip.getByRole('button', { name: 'Stop sending' }).click()
  await expect(step.page.getByLabel('Film or choose a clip, Face-on')).toBeAttached()
  await expect.poll(() => keptOn(step.page)).toEqual(NOTHING)
  await expect.poll(() => filmInStore(draft)).toEqual({ uploads: 0, objects: 0 })
  await context.close()
})

test('[film.4] a browser without private files keeps the film in its database', async ({ browser }) => {
  const context = await signIn(browser)
  await context.route('**/_nuxt/keep.worker-*.js', async (route) => {
    const script = await (await route.fetch()).text()
    await route.fulfill({ contentType: 'text/javascript', body: `delete FileSystemFileHandle.prototype.createSyncAccessHandle;\n${script}` })
  })
  const draft = await startDraft(world, 'student')
  const step = await openFilmStep(context, draft)
  await step.choose(short)
  await untilKept(step)
  await untilArrived(2)
  await step.page.reload()
  await untilTaken(step.clip)
  expectNothingInVain(SHORT.partCount)
  expect(await sha256InStore(draft)).toBe(await sha256OfFile(short))
  await context.close()
})

test('[film.4] a copy that was damaged on the device is not sent', async ({ browser }) => {
  const context = await signIn(browser)
  const draft = await startDraft(world, 'student')
  const { page, clip, ...step } = await openFilmStep(context, draft)
  await step.choose(short)
  await untilArrived(1)
  await clip.getByRole('button', { name: 'Pause' }).click()
  await expect.poll(() => keptOn(page), { timeout: 20_000 }).toMatchObject({ parts: SHORT.partCount })
  await page.reload()
  await expect(clip).toContainText('Paused.')
  await damagePart(page, SHORT.partCount)
  await clip.getByRole('button', { name: 'Go on' }).click()
  await expect(clip).toContainText('This device can no longer read the file.', { timeout: 30_000 })
  expect(line.puts.map(put => put.number)).not.toContain(SHORT.partCount)
  await context.close()
})

const NOTHING = { films: 0, parts: 0, folders: [] }

/** What of films lies on the device of this browser. */
async function keptOn(page: Page) {
  return await page.evaluate(async () => {
    const root = await navigator.storage.getDirectory()
    const folders: string[] = []
    for await (const name of (await root.getDirectoryHandle('film-being-sent', { create: true })).keys()) folders.push(name)
    const database = await new Promise<IDBDatabase>((resolve, reject) => {
      const request = indexedDB.open('turfnote-sending')
      request.onsuccess = () => resolve(request.result)
      request.onerror = () => reject(request.error)
    })
    const count = (store: string) => new Promise<number>((resolve) => {
      const request = database.transaction(store).objectStore(store).count()
      request.onsuccess = () => resolve(request.result)
    })
    const kept = { films: await count('films'), parts: await count('parts'), folders }
    database.close()
    return kept
  })
}

/** Turns some bytes of a part, as a failing card would. */
async function damagePart(page: Page, partNumber: number): Promise<void> {
  await page.evaluate(async (number) => {
    const shelf = await (await navigator.storage.getDirectory()).getDirectoryHandle('film-being-sent')
    for await (const name of shelf.keys()) {
      const file = await (await shelf.getDirectoryHandle(name)).getFileHandle(String(number))
      const writer = await file.createWritable({ keepExistingData: true })
      await writer.write({ type: 'write', position: 1000, data: new Uint8Array([1, 2, 3, 4]) })
      await writer.close()
    }
  }, partNumber)
}

const storeSchema = z.object({ uploads: z.array(z.object({ key: z.string() })), objects: z.array(z.object({ key: z.string() })) })

/** What the store holds of a draft's film, begun or whole. */
async function filmInStore(draft: string) {
  const { uploads, objects } = storeSchema.parse(await (await fetch(`${world.standIns.storageUrl}/__fake__/state`)).json())
  const ofDraft = (list: { key: string }[]) => list.filter(({ key }) => key.includes(draft)).length
  return { uploads: ofDraft(uploads), objects: ofDraft(objects) }
}
