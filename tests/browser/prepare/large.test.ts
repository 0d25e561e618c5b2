import { expect, inWorker, prepareOn, test } from './fixtures'

test('[film.2] makes a film over 1920 pixels smaller, and no smaller than that', async ({ page }) => {
  const made = await page.evaluate(() => globalThis.prepareHarness.prepareDrawn(1440, 2560, 12))
  expect(made).toMatchObject({ way: 're-encoded', frames: 12, setbacks: [] })
  expect(made.size).toEqual([1080, 1920])
})

/** Counts the worker's pictures that are not closed, and tells whoever listens. */
const COUNTING = `
  let open = 0, most = 0, decoded = 0
  const channel = new BroadcastChannel('pictures')
  const born = frame => { open += 1; most = Math.max(most, open); return frame }
  const { close, clone } = VideoFrame.prototype
  VideoFrame.prototype.close = function () {
    // A closed picture has no width; closing it again is nothing.
    if (this.codedWidth > 0) { open -= 1; channel.postMessage({ open, most, decoded }) }
    close.call(this)
  }
  VideoFrame.prototype.clone = function () { return born(clone.call(this)) }
  self.VideoFrame = new Proxy(VideoFrame, { construct: (made, given) => born(Reflect.construct(made, given)) })
  self.VideoDecoder = class extends VideoDecoder {
    constructor(init) { super({ ...init, output: (frame) => { decoded += 1; init.output(born(frame)) } }) }
  }
`

for (const [what, keep] of [['all of a clip', [0.01, 2.3]], ['a stretch of it', [1.01, 1.52]]] satisfies [string, [number, number]][]) {
  test(`[film.2] holds few pictures at a time while it prepares ${what}, and none afterwards`, async ({ page }) => {
    await page.evaluate(() => {
      new BroadcastChannel('pictures').addEventListener('message', ({ data }) => { document.title = JSON.stringify(data) })
    })
    await inWorker(page, COUNTING)
    const { prepared } = await prepareOn(page, '/demo/right-sound-face-on.mp4', [keep])
    expect(prepared).toMatchObject({ way: 're-encoded', setbacks: [] })
    const counted: unknown = JSON.parse(await page.title())
    expect(counted).toMatchObject({ open: 0 })
    const { most = Infinity, decoded = 0 } = counted !== null && typeof counted === 'object' ? Object.fromEntries(Object.entries(counted)) : {}
    expect(decoded).toBeGreaterThanOrEqual(prepared.frames)
    // The library hands a decoder at most 40 frames ahead, and the encoder holds a few: 140 MB at 1920 by 1080, whatever the length.
    expect(most).toBeLessThanOrEqual(48)
  })
}
