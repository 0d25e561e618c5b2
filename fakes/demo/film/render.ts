/**
 * Draws the demo's film in Chromium and writes it to `made/`, each clip with its truth beside it.
 *
 * Run by hand after a change of the model or the drawing: `npx jiti fakes/demo/film/render.ts [name ...]` from the root of the
 * repository. `CHROMIUM_PATH` says where Chromium is, unless it is /usr/bin/chromium. Nothing else needs it: the clips are kept.
 */
import { mkdirSync, statSync, writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { chromium } from '@playwright/test'
import type { Page } from '@playwright/test'
import { build } from 'vite'
import { HEIGHT_PX, WIDTH_PX } from './camera'
import type { FilmClip, FilmClipName } from './clips'
import { FILM_CLIPS, madeClipPath } from './clips'
import { MARKS } from './marks'
import type { RenderedClip } from './page'
import { timelineOf } from './timeline'
import { makeTruth } from './truth'
import type { Truth } from './truth-file'
import { QUANTUM, truthSchema } from './truth-file'

const CHROMIUM_FLAGS = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']

/** Chromium's encoder takes this as if for 30 frames a second; so all clips together stay under 8 MB. */
const BITS_PER_SECOND = 430_000

/** A mark may lie this far from where the drawing put it. */
const ALLOWED_PX = 2

async function main(names: readonly string[]): Promise<void> {
  const clips = FILM_CLIPS.filter(clip => names.length === 0 || names.includes(clip.name))
  if (clips.length === 0) throw new Error(`No such clip; there are ${FILM_CLIPS.map(clip => clip.name).join(', ')}.`)
  mkdirSync(fileURLToPath(new URL('./made/', import.meta.url)), { recursive: true })
  const script = await bundlePage()
  const browser = await chromium.launch({ executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium', args: CHROMIUM_FLAGS })
  try {
    const page = await browser.newPage()
    // WebCodecs is for secure contexts; a page of one's own at 127.0.0.1 is one, and never leaves this process.
    await page.route('http://127.0.0.1/', route => route.fulfill({ contentType: 'text/html', body: '<!doctype html><title>Film</title>' }))
    await page.goto('http://127.0.0.1/')
    await page.addScriptTag({ content: script })
    for (const clip of clips) await renderOne(page, clip)
  }
  finally {
    await browser.close()
  }
}

async function renderOne(page: Page, clip: FilmClip & { name: FilmClipName }): Promise<void> {
  const { mp4Base64, drawn, misplaced } = await page.evaluate(
    ([name, bits]) => globalThis.renderClip(name, bits),
    [clip.name, BITS_PER_SECOND] as const,
  )
  if (misplaced.length > 0) throw new Error(`Frames ${misplaced.join(', ')} of ${clip.name} show another moment than their own.`)
  const truth = makeTruth(timelineOf(clip))
  const drawnWithinPx = largestDistancePx(truth.marks, drawn)
  if (drawnWithinPx > ALLOWED_PX) throw new Error(`${clip.name} is drawn ${drawnWithinPx.toFixed(2)} px from its truth.`)
  const file: Truth = truthSchema.parse({ ...truth, drawnWithinPx: Number(drawnWithinPx.toFixed(3)) })
  const path = madeClipPath(clip.name, 'mp4')
  writeFileSync(path, Buffer.from(mp4Base64, 'base64'))
  writeFileSync(madeClipPath(clip.name, 'json'), `${JSON.stringify(file)}\n`)
  console.log(`${path}: ${drawn.length} frames, ${statSync(path).size} bytes, marks within ${drawnWithinPx.toFixed(3)} px`)
}

/** Largest distance in pixels between the truth as it is kept and the joints, ends and edges as they were drawn. */
function largestDistancePx(marks: Truth['marks'], drawn: RenderedClip['drawn']): number {
  const distances = drawn.flatMap((frame, index) => MARKS.map((mark) => {
    const place = frame[mark]
    const [x, y] = [marks[mark].x[index], marks[mark].y[index]]
    const isAbsent = mark === 'ball' && !place
    if (isAbsent) return 0
    if (!place || x === undefined || y === undefined) throw new Error(`${mark} was not drawn in frame ${index}.`)
    return Math.hypot(place.x - x / QUANTUM * WIDTH_PX, place.y - y / QUANTUM * HEIGHT_PX)
  }))
  return distances.reduce((a, b) => Math.max(a, b), 0)
}

async function bundlePage(): Promise<string> {
  const built = await build({
    configFile: false,
    logLevel: 'error',
    build: { write: false, target: 'esnext', minify: false, lib: { entry: fileURLToPath(new URL('./page.ts', import.meta.url)), name: 'page', formats: ['iife'] } },
  })
  const outputs = Array.isArray(built) ? built : [built]
  const code = outputs.flatMap(each => 'output' in each ? each.output : []).map(each => each.type === 'chunk' ? each.code : '').join('\n')
  if (code === '') throw new Error('The page could not be bundled.')
  return code
}

await main(process.argv.slice(2))
