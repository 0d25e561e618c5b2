import { FILM_CLIPS } from '#fakes/demo/film/clips'
import { readTruth } from '#fakes/demo/film/truth-file'
import { expect, test } from './fixtures'

for (const { name } of FILM_CLIPS) {
  test(`[film.2] suggests the swings of ${name} and nothing else`, async ({ page }) => {
    const spans = await page.evaluate(path => globalThis.prepareHarness.suggest(path), `/demo/${name}.mp4`)
    const { swings } = readTruth(name)
    expect(spans).toHaveLength(swings.length)
    for (const [index, { positionsS }] of swings.entries()) {
      const [fromS = NaN, toS = NaN] = spans[index] ?? []
      expect(fromS).toBeLessThan(positionsS.address)
      expect(toS).toBeGreaterThan(positionsS.finish)
    }
  })
}

test('[film.2] suggests nothing where nothing moves, or where the film cannot be decoded', async ({ page }) => {
  expect(await page.evaluate(() => globalThis.prepareHarness.suggest('/films/over-a-minute.mp4'))).toEqual([])
  expect(await page.evaluate(() => globalThis.prepareHarness.suggest('/films/hevc.mp4'))).toEqual([])
})
