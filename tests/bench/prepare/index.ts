import { chromium } from '@playwright/test'
import { servePage } from '#tests/browser/prepare/serve-page'
import { CHROMIUM_FLAGS, findChromium } from '#tests/support/chromium'
import type { Bench, Pair } from '../bench'
import { rowFrom } from '../bench'
import type { Work } from './page/loops'

const RUNS = 5
const AIM = 0.8

const WORKS: Record<string, Work> = {
  'three swings, 720 × 1280, 120 a second': { path: '/demo/right-three-face-on.mp4', keep: [[0.01, 2.9], [3.41, 6.4], [6.91, 9.4]] },
  'one swing, 720 × 1280, 240 a second': { path: '/demo/right-sound-face-on.mp4', keep: [[0.01, 2.3]] },
}

export const prepare: Bench = {
  about: 'Preparing a clip in the page, worker and file included, against a bare loop of decoder and encoder over the same frames, five runs in turn.',
  async run(tell) {
    const served = await servePage('tests/bench/prepare/page', '.bench/prepare-page')
    const browser = await chromium.launch({ executablePath: findChromium(), args: CHROMIUM_FLAGS })
    try {
      const page = await browser.newPage()
      await page.goto(served.address)
      const measure = (work: Work, isBareFirst: boolean) => page.evaluate(([what, first]) => globalThis.measurePreparing(what, first), [work, isBareFirst] satisfies [Work, boolean])
      const rows = []
      for (const [name, work] of Object.entries(WORKS)) {
        const pairs: Pair[] = []
        for (let run = 0; run < RUNS; run++) {
          const { prepared, bare, frames, way } = await measure(work, run % 2 === 1)
          if (way !== 're-encoded') throw new Error(`The clip was ${way}, so there is nothing to compare.`)
          tell(`${name}: run ${run + 1}, ${frames} frames, prepared ${prepared.toFixed(0)}/s, bare ${bare.toFixed(0)}/s, ratio ${(prepared / bare).toFixed(2)}`)
          pairs.push({ value: prepared, yardstick: bare })
        }
        rows.push(rowFrom(name, 'frames/s', pairs, AIM))
      }
      return rows
    }
    finally {
      await browser.close()
      await served.close()
    }
  },
}
