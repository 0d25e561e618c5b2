import { readTruth } from '#tests/support/film/films'
import { expect, prepareOn, test } from './fixtures'
import { longestKeyGapS } from './read-output'

/** mediabunny writes MP4 on this base, a multiple of usual frame rates. */
const OUTPUT_TICK_S = 1 / 57_600

function truthS(name: string): number[] {
  const { timeBase, ticks } = readTruth(name)
  return ticks.map(tick => tick / timeBase)
}

/** The largest distance of any frame's time from where it should be, both counted from the first frame. */
function largestErrorS(timesS: number[], expectedS: number[]): number {
  const [first = 0] = expectedS
  return timesS.reduce((largest, timeS, index) => Math.max(largest, Math.abs(timeS - ((expectedS[index] ?? NaN) - first))), 0)
}

const FILMS = ['b-frames.mp4', 'uneven.mov', 'edit-list.mp4', 'negative-offsets.mp4', 'ntsc-29.97.mp4', 'slow-240.mp4', 'rotated-90.mov', 'with-sound.mp4', 'fragmented.mp4', 'vp9.webm', 'vp8-with-sound.webm', 'ten-bit.mp4']

for (const name of FILMS) {
  test(`[film.2] keeps every frame of ${name} with its own time, upright, with a key frame every tenth of a second`, async ({ page }) => {
    const { prepared, output, progress } = await prepareOn(page, `/films/${name}`, [])
    const expected = truthS(name)
    expect(prepared).toMatchObject({ way: 're-encoded', setbacks: [] })
    expect(output.timesS.length).toBe(expected.length)
    expect(prepared.frames).toBe(expected.length)
    expect(largestErrorS(output.timesS, expected)).toBeLessThanOrEqual(OUTPUT_TICK_S)
    expect(output.timesS[0]).toBe(0)
    expect(longestKeyGapS(output)).toBeLessThanOrEqual(0.1 + OUTPUT_TICK_S)
    expect(output).toMatchObject({ codec: 'avc', rotationDeg: 0, timeBase: 57_600, trackCount: 1, tags: [], rawTags: [] })
    expect(output.codecString).toMatch(/^avc1\.(?:42|4d|64)/)
    expect(output.boxes.indexOf('moov')).toBeLessThan(output.boxes.indexOf('mdat'))
    expect(progress.at(-1)).toEqual({ done: expected.length, total: expected.length })
  })
}

test('[film.2] shows at each time the picture that was filmed then', async ({ page }) => {
  for (const name of ['b-frames.mp4', 'uneven.mov', 'edit-list.mp4', 'rotated-90.mov']) {
    const offsets = await page.evaluate(film => globalThis.prepareHarness.compare(film, []), `/films/${name}`)
    expect(offsets, name).toEqual(truthS(name).map(() => 0))
  }
})
