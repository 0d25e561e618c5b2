import { rmSync } from 'node:fs'
import { join } from 'node:path'
import type { BrowserContext, Page } from '@playwright/test'
import { chromium } from '@playwright/test'
import { createStorage } from '#server/adapters/storage'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { makePaddedFilm } from '#tests/browser/upload/film'
import { watchLine } from '#tests/browser/upload/line'
import { PHONE } from '#tests/browser/worlds'
import { call } from '#tests/support/call'
import { CHROMIUM_FLAGS, findChromium } from '#tests/support/chromium'
import { startDraft } from '#tests/support/path'
import { makeTemplate } from '#tests/support/template'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import type { Bench, BenchRow, Pair } from './bench'
import { rowFrom } from './bench'
import type { BrowserMemory } from './upload/browser-memory'
import { readMemory, watchMemory } from './upload/browser-memory'

const WORLD_INDEX = 59
const DATA_DIR = join('.bench', 'upload')
const FILM_BYTES = 500_000_000
const RUN_COUNT = 5
const RATE_AIM = 0.9
const MEMORY_MAX_BYTES = 64_000_000
const AT_ONCE_COUNT = 3

/** Everything that one run needs. */
interface Scene {
  world: World
  context: BrowserContext
  profileDir: string
  filmPath: string
}

interface SentFilm {
  bytesASecond: number
  memory: BrowserMemory
}

/**
 * A film of 500 MB from Chromium to the store stand-in on this machine: the product's own page, from the choosing of the file to the
 * last answer of the store (begun on the server, copied and hashed on the device, checked, three parts in flight), against one plain
 * PUT of the same file from the same browser.
 */
export const upload: Bench = {
  about: 'Sending 500 MB from the product\'s page, hashed and kept on the device, against one plain PUT of the same file, five runs in turn.',
  async run(tell) {
    await makeTemplate()
    rmSync(DATA_DIR, { recursive: true, force: true })
    const world = await startWorld({ index: WORLD_INDEX })
    const profileDir = join(process.cwd(), DATA_DIR, 'profile')
    const filmPath = await makePaddedFilm(DATA_DIR, FILM_BYTES)
    const context = await chromium.launchPersistentContext(profileDir, {
      executablePath: findChromium(), args: CHROMIUM_FLAGS, viewport: PHONE, baseURL: world.url,
    })
    try {
      await signIn(context)
      return await measure({ world, context, profileDir, filmPath }, tell)
    }
    finally {
      await context.close()
      await world.close()
      rmSync(DATA_DIR, { recursive: true, force: true })
    }
  },
}

async function measure(scene: Scene, tell: (line: string) => void): Promise<BenchRow[]> {
  const rates: Pair[] = []
  const memories: BrowserMemory[] = []
  for (let run = 1; run <= RUN_COUNT; run += 1) {
    const yardstick = await putPlain(scene)
    const { bytesASecond, memory } = await sendFromPage(scene)
    rates.push({ value: bytesASecond / 1e6, yardstick: yardstick / 1e6 })
    memories.push(memory)
    tell(`run ${run}: ${megabytes(bytesASecond)} a second, plain PUT ${megabytes(yardstick)} a second; `
      + `memory ${megabytes(memory.allBytes)} over idle in the whole browser, ${megabytes(memory.rendererBytes)} of it in the pages`)
  }
  const mostBytes = Math.max(...memories.map(memory => memory.allBytes))
  return [
    rowFrom('bytes a second, from choosing to the store\'s last answer', 'MB/s', rates, RATE_AIM),
    limitRow('memory of all browser processes over idle, highest of all runs', 'MB', mostBytes / 1e6, MEMORY_MAX_BYTES / 1e6),
    await measureCut(scene, tell),
  ]
}

/** The yardstick: one PUT of the whole file, as one part. @returns bytes a second */
async function putPlain({ world, context, filmPath }: Scene): Promise<number> {
  const { environment } = world
  const storage = createStorage({
    endpoint: world.standIns.storageUrl,
    region: environment.STORAGE_REGION ?? '',
    bucket: environment.STORAGE_BUCKET ?? '',
    accessKey: environment.STORAGE_ACCESS_KEY ?? '',
    secretKey: environment.STORAGE_SECRET_KEY ?? '',
  })
  const key = 'bench/plain.mp4'
  const uploadId = await storage.createUpload(key, 'video/mp4')
  const url = await storage.presignPart(key, uploadId, 1, 3600)
  const page = await context.newPage()
  await page.goto('/reviews')
  await page.evaluate(() => {
    const input = document.createElement('input')
    input.type = 'file'
    input.id = 'plain'
    document.body.append(input)
  })
  await page.locator('#plain').setInputFiles(filmPath)
  const seconds = await page.evaluate(async (address) => {
    const input = document.querySelector('#plain')
    const file = input instanceof HTMLInputElement ? input.files?.[0] : undefined
    if (file === undefined) throw new Error('No file.')
    const startedMs = performance.now()
    await new Promise<void>((resolve, reject) => {
      const request = new XMLHttpRequest()
      request.onload = () => request.status === 200 ? resolve() : reject(new Error(`The store answered ${request.status}.`))
      request.onerror = () => reject(new Error('The plain PUT failed.'))
      request.open('PUT', address)
      request.send(file.slice())
    })
    return (performance.now() - startedMs) / 1000
  }, url)
  await page.close()
  await storage.abortUpload(key, uploadId)
  return FILM_BYTES / seconds
}

async function sendFromPage(scene: Scene): Promise<SentFilm> {
  const { world, profileDir, filmPath } = scene
  const { page, draft } = await openFilmStep(scene)
  await page.evaluate(() => {
    document.addEventListener('change', () => performance.mark('chosen'), { capture: true, once: true })
  })
  const watch = watchMemory(profileDir, readMemory(profileDir))
  await choose(page, filmPath)
  await taken(page).waitFor({ timeout: 120_000 })
  const memory = watch.stop()
  const seconds = await page.evaluate(() => {
    const [chosen] = performance.getEntriesByName('chosen')
    const puts = performance.getEntriesByType('resource').filter(entry => entry.name.includes('partNumber='))
    return (Math.max(...puts.map(put => put.startTime + put.duration)) - (chosen?.startTime ?? NaN)) / 1000
  })
  await page.close()
  await takeAway(world, draft)
  return { bytesASecond: FILM_BYTES / seconds, memory }
}

/** Breaks the line once with parts on their way. */
async function measureCut(scene: Scene, tell: (line: string) => void): Promise<BenchRow> {
  const line = watchLine(scene.world.addresses.storagePort)
  const { page, draft } = await openFilmStep(scene)
  await choose(page, scene.filmPath)
  while (line.arrived().length < 10 || line.underWay().length < AT_ONCE_COUNT) await page.waitForTimeout(5)
  const cut = line.cut()
  await taken(page).waitFor({ timeout: 120_000 })
  line.close()
  await page.close()
  await takeAway(scene.world, draft)
  const againCount = line.puts.length - new Set(line.puts.map(put => put.number)).size
  tell(`cut with ${cut.length} parts in flight: ${againCount} sent again`)
  return limitRow('parts sent again after a cut, against those in flight', 'parts', againCount, cut.length)
}

/** A row for what must not be more than a limit: the ratio is limit over measured, and 1 is good enough. */
function limitRow(metric: string, unit: string, value: number, limit: number): BenchRow {
  return { metric, value, unit, yardstick: limit, ratio: limit / Math.max(value, Number.EPSILON), aim: 1, met: value <= limit }
}

async function openFilmStep({ world, context }: Scene): Promise<{ page: Page, draft: string }> {
  const draft = await startDraft(world, 'student')
  const page = await context.newPage()
  await page.goto(`/reviews/new?draft=${draft}&step=film`)
  await page.getByRole('button', { name: 'Go on' }).and(page.locator(':enabled')).waitFor()
  // What starting a page leaves behind would count as memory of sending.
  await page.waitForTimeout(1500)
  return { page, draft }
}

const choose = (page: Page, path: string) => page.getByLabel('Film or choose a clip, Face-on').setInputFiles(path)
const taken = (page: Page) => page.getByRole('region', { name: 'Face-on clip' }).getByText('Taken.')

/** So that the disk holds one film at a time. */
async function takeAway(world: World, draft: string): Promise<void> {
  const review = await call(world, 'GET', `/api/reviews/${draft}`, { as: 'student' })
  for (const id of review.text.match(/(?<="clips":\[\{"id":")[^"]+/g) ?? []) await call(world, 'DELETE', `/api/clips/${id}`, { as: 'student' })
}

async function signIn(context: BrowserContext): Promise<void> {
  const page = await context.newPage()
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill('student@demo.turfnote.test')
  await page.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL(url => !url.pathname.includes('sign-in'))
  await page.close()
}

function megabytes(bytes: number): string {
  return `${(bytes / 1e6).toFixed(0)} MB`
}
