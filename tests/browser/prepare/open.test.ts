import { readTruth } from '#tests/support/film/films'
import { expect, test } from './fixtures'

test('[film.2] reads of a clip what the server will read, and what this browser can do with it', async ({ page }) => {
  const opened = await page.evaluate(() => globalThis.prepareHarness.open('/films/uneven.mov'))
  if (!('facts' in opened)) throw new Error(opened.refused)
  const truth = readTruth('uneven.mov')
  expect(opened.facts).toMatchObject({ container: 'mov', codec: 'avc', widthPx: 96, heightPx: 160, rotationDeg: 0, timeBase: truth.timeBase, canDecode: true, hasSound: false, hasLocation: false })
  expect(opened.facts.frameTicks).toEqual(truth.ticks)
  expect(opened.facts.encoder).toMatchObject({ codec: 'avc' })
  expect(opened.problem).toBeUndefined()
})

for (const [name, facts] of Object.entries({
  'with-sound.mp4': { hasSound: true, hasLocation: false },
  'place-in-keys.mov': { hasLocation: true, deviceTags: ['com.apple.quicktime.model'] },
  'place-in-user-data.mp4': { hasLocation: true },
  'place-in-text.mov': { hasLocation: true },
  'place.webm': { hasLocation: true, container: 'webm' },
  'rotated-90.mov': { rotationDeg: 90, widthPx: 160, heightPx: 96 },
  'hevc.mp4': { codec: 'hevc', canDecode: false },
  'slow-240.mp4': { framesPerSecond: 240 },
})) {
  test(`[film.2] knows of ${name} what it tells`, async ({ page }) => {
    const opened = await page.evaluate(path => globalThis.prepareHarness.open(path), `/films/${name}`)
    expect(opened).toMatchObject({ facts })
  })
}

test('[film.2] names what is no film, what is cut short and what holds no moving picture', async ({ page }) => {
  const open = (path: string) => page.evaluate(film => globalThis.prepareHarness.open(film), path)
  expect(await open('/films/truth.json')).toEqual({ refused: 'not-video' })
  expect(await open('/films/sound-only.mp4')).toEqual({ refused: 'not-video' })
  expect(await open('/films/one-frame.mp4')).toEqual({ refused: 'no-frames' })
})

test('[film.2] tells before any work what this browser cannot prepare and what shows too little', async ({ page }) => {
  const open = (path: string) => page.evaluate(film => globalThis.prepareHarness.open(film), path)
  expect(await open('/films/hevc.mp4')).toMatchObject({ problem: 'codec-not-shown' })
  expect(await open('/films/fifteen.mp4')).toMatchObject({ problem: 'too-few-frames-a-second' })
})

test('[film.2] shows a chosen clip at once, upright, and the frame on show at any time', async ({ page }) => {
  const { timeBase, ticks } = readTruth('uneven.mov')
  const show = (path: string, timeS: number) => page.evaluate(([film, at]) => globalThis.prepareHarness.show(film, at), [path, timeS] satisfies [string, number])
  expect(await show('/films/uneven.mov', 0)).toMatchObject({ shownS: 0, widthPx: 96, heightPx: 160 })
  expect((await show('/films/uneven.mov', 1)).shownS).toBe(Math.max(...ticks.filter(tick => tick <= timeBase)) / timeBase)
  expect((await show('/films/uneven.mov', 99)).shownS).toBe((ticks.at(-1) ?? NaN) / timeBase)
  expect(await show('/films/rotated-90.mov', 0.2)).toMatchObject({ widthPx: 160, heightPx: 96 })
  // The test picture is lit all over: a corner that stayed black was drawn turned the wrong way.
  const { corners } = await show('/films/rotated-90.mov', 0.2)
  expect(corners.every(colour => Math.max(...colour) > 60)).toBe(true)
})

test('[film.2] a hand on the slider gets the last frame it asked for', async ({ page }) => {
  const shown = await page.evaluate(() => globalThis.prepareHarness.scrub('/films/plain-30.mp4', [0, 0.3, 0.7, 1.1, 1.5]))
  expect(shown.at(-1)).toBeCloseTo(1.5, 6)
  expect(shown.slice(0, -1)).toEqual([undefined, undefined, undefined, undefined])
})

test('[film.2] tells how bright the picture is and whether it stands upright', async ({ page }) => {
  const look = await page.evaluate(() => globalThis.prepareHarness.look('/demo/right-sound-face-on.mp4'))
  expect(look.isUpright).toBe(true)
  expect(look.meanBrightness).toBeGreaterThan(0.3)
  expect(look.meanBrightness).toBeLessThan(0.9)
  // A film of black alone.
  expect((await page.evaluate(() => globalThis.prepareHarness.look('/films/over-a-minute.mp4'))).meanBrightness).toBeLessThan(0.1)
  expect((await page.evaluate(() => globalThis.prepareHarness.look('/films/rotated-90.mov'))).isUpright).toBe(false)
})
