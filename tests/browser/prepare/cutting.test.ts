import { readTruth } from '#tests/support/film/films'
import type { SpanS } from '~/film/prepare'
import { expect, prepareOn, test } from './fixtures'
import { longestKeyGapS } from './read-output'

const OUTPUT_TICK_S = 1 / 57_600

function timesWithin(name: string, [fromS, toS]: SpanS): number[] {
  const { timeBase, ticks } = readTruth(name)
  return ticks.map(tick => tick / timeBase).filter(timeS => timeS >= fromS && timeS < toS)
}

for (const name of ['b-frames.mp4', 'uneven.mov', 'plain-30.mp4']) {
  test(`[film.2] leaves nothing in the file of what was cut away from ${name}`, async ({ page }) => {
    const keep: SpanS[] = [[0.41, 0.93], [1.31, 1.72]]
    const { prepared, output } = await prepareOn(page, `/films/${name}`, keep)
    const [first = [], second = []] = keep.map(span => timesWithin(name, span))
    expect(prepared).toMatchObject({ way: 're-encoded', setbacks: [], frames: first.length + second.length })
    expect(prepared.spans.map(span => span.toFrame - span.fromFrame)).toEqual([first.length, second.length])
    // All packets of the file, hidden ones too: as many as were kept, none before the first or after the last.
    expect(output.packets).toHaveLength(first.length + second.length)
    const joinS = prepared.spans[1]?.newS[0] ?? NaN
    const expected = [...first.map(timeS => timeS - (first[0] ?? 0)), ...second.map(timeS => timeS - (second[0] ?? 0) + joinS)]
    const errors = output.timesS.map((timeS, index) => Math.abs(timeS - (expected[index] ?? NaN)))
    expect(Math.max(...errors)).toBeLessThanOrEqual(OUTPUT_TICK_S)
    expect(longestKeyGapS(output)).toBeLessThanOrEqual(0.1 + OUTPUT_TICK_S)
  })
}

test('[film.2] joins swings with one usual frame between them and says where each lies now', async ({ page }) => {
  const { prepared, output } = await prepareOn(page, '/films/plain-30.mp4', [[1.5, 1.8], [0.2, 0.5]])
  const frameS = 1 / 30
  // Nine frames each: 6 to 14 and 45 to 53.
  expect(prepared.spans.map(({ fromFrame, toFrame }) => [fromFrame, toFrame])).toEqual([[6, 15], [45, 54]])
  const [[from1 = 0, to1 = 0] = [], [from2 = 0, to2 = 0] = []] = prepared.swings
  expect([from1, to1, from2, to2].map(timeS => Math.round(timeS / frameS * 1000) / 1000)).toEqual([0, 9, 9, 18])
  const gaps = output.timesS.slice(1).map((timeS, index) => timeS - (output.timesS[index] ?? 0))
  expect(Math.max(...gaps.map(gapS => Math.abs(gapS - frameS)))).toBeLessThanOrEqual(OUTPUT_TICK_S)
})

test('[film.2] the pictures of a cut film are those that were kept', async ({ page }) => {
  const offsets = await page.evaluate(() => globalThis.prepareHarness.compare('/films/uneven.mov', [[0.41, 0.93], [1.31, 1.72]]))
  expect(offsets).toEqual(offsets.map(() => 0))
  expect(offsets.length).toBeGreaterThan(25)
})

test('[film.2] a film that is as it should be is cut at its key frames without being made anew', async ({ page }) => {
  const made = await page.evaluate(() => globalThis.prepareHarness.prepareTwice('/films/b-frames.mp4', [], [[0.3, 0.9], [1.2, 1.5]]))
  expect(made.first.way).toBe('re-encoded')
  expect(made.second).toMatchObject({ way: 'cut-and-stripped', frames: 27, setbacks: [] })
  expect(made.isSameBytes).toBe(true)
})

test('[film.2] a film that is as it should be is made anew when the cut is not at a key frame', async ({ page }) => {
  const made = await page.evaluate(() => globalThis.prepareHarness.prepareTwice('/films/b-frames.mp4', [], [[0.34, 0.9]]))
  expect(made.second).toMatchObject({ way: 're-encoded', frames: 16, setbacks: [] })
})

test('[film.2] refuses to keep nothing, or more than a minute, before any work', async ({ page }) => {
  expect(await page.evaluate(() => globalThis.prepareHarness.refuse('/films/plain-30.mp4', [[5, 6]]))).toBe('no-frames')
  expect(await page.evaluate(() => globalThis.prepareHarness.refuse('/films/over-a-minute.mp4', []))).toBe('too-long')
})
