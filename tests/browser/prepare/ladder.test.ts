import { FILM_REFUSALS } from '#shared/domain/film/refusals'
import { addToIndex, metadata } from '#tests/support/film/boxes'
import { readMadeFilm, readTruth } from '#tests/support/film/films'
import { expect, inWorker, prepareOn, test } from './fixtures'

test('[film.2] sound, place and phone details are gone from what is sent', async ({ page }) => {
  for (const name of ['with-sound.mp4', 'place-in-keys.mov', 'place-in-user-data.mp4', 'place-in-text.mov', 'place.webm']) {
    const { output, bytes } = await prepareOn(page, `/films/${name}`, [])
    expect(output, name).toMatchObject({ trackCount: 1, tags: [], rawTags: [] })
    const text = Buffer.from(bytes).toString('latin1')
    for (const word of ['+55.7000', '-002.9000', 'ISO6709', 'Phone 1', 'soun', 'mp4a', 'location']) expect(text.includes(word), `${word} in ${name}`).toBe(false)
  }
})

test('[film.2] tells the rate that slow motion was filmed at, whose tag is gone', async ({ page }) => {
  const value = Buffer.alloc(4)
  value.writeFloatBE(240)
  const body = addToIndex(readMadeFilm('plain-30.mp4'), metadata('com.android.capture.fps', 23, value))
  expect(body.toString('latin1')).toContain('com.android.capture.fps')
  await page.route('**/films/slowed.mp4', route => route.fulfill({ contentType: 'video/mp4', body }))
  const { prepared, output, bytes } = await prepareOn(page, '/films/slowed.mp4', [[0.5, 1.5]])
  expect(prepared).toMatchObject({ way: 're-encoded', captureFramesPerSecond: 240, frames: 30 })
  expect(output.rawTags).toEqual([])
  expect(Buffer.from(bytes).toString('latin1')).not.toContain('android')
})

test('[film.2] a film that this browser cannot decode and no other would show is explained, not sent', async ({ page }) => {
  const { prepared, words, name } = await prepareOn(page, '/films/hevc.mp4', [[0.2, 0.6]])
  expect(prepared).toMatchObject({ way: 'untouched', reason: 'codec-not-shown', swings: [[0.2, 0.6]] })
  expect(words).toContain(FILM_REFUSALS['codec-not-shown'].whatToDo)
  expect(name).toBe('hevc.mp4')
})

for (const [what, lines] of Object.entries({
  'has no WebCodecs': 'delete self.VideoDecoder; delete self.VideoEncoder;',
  'makes no film': 'delete self.VideoEncoder;',
  'throws when it is asked what it can do': 'VideoDecoder.isConfigSupported = VideoEncoder.isConfigSupported = () => { throw new TypeError("no") };',
  'gives up in the middle of decoding': 'VideoDecoder.prototype.decode = () => { throw new DOMException("no", "EncodingError") };',
})) {
  test(`[film.2] a browser that ${what} sends all of the clip, without its sound, and says so`, async ({ page }) => {
    await inWorker(page, lines)
    const { prepared, output, words, bytes } = await prepareOn(page, '/films/with-sound.mp4', [[0.2, 0.6]])
    const { timeBase, ticks } = readTruth('with-sound.mp4')
    expect(prepared).toMatchObject({ way: 'remuxed', frames: ticks.length, swings: [[0.2, 0.6]] })
    expect(words).toContain('all of it will be sent')
    expect(output.timesS.map(timeS => Math.round(timeS * timeBase))).toEqual(ticks)
    expect(output).toMatchObject({ trackCount: 1, tags: [], rawTags: [] })
    expect(Buffer.from(bytes).toString('latin1')).not.toContain('mp4a')
    expect(await page.evaluate(() => globalThis.prepareHarness.listOnDevice())).toEqual([])
  })
}

test('[film.2] a copied film keeps its turn, and shows no frame that its edit list hid', async ({ page }) => {
  await inWorker(page, 'delete self.VideoDecoder;')
  const turned = await prepareOn(page, '/films/rotated-90.mov', [])
  expect(turned.output).toMatchObject({ rotationDeg: 90, size: [160, 96] })
  const edited = await prepareOn(page, '/films/edit-list.mp4', [])
  const { timeBase, ticks } = readTruth('edit-list.mp4')
  expect(edited.prepared.way).toBe('remuxed')
  expect(edited.output.timesS.filter(timeS => timeS >= 0).map(timeS => Math.round(timeS * timeBase))).toEqual(ticks)
})

test('[film.2] makes VP9 where the browser cannot make H.264', async ({ page }) => {
  await inWorker(page, 'const asked = VideoEncoder.isConfigSupported.bind(VideoEncoder); VideoEncoder.isConfigSupported = config => config.codec.startsWith("avc") ? Promise.resolve({ supported: false, config }) : asked(config);')
  const { prepared, output } = await prepareOn(page, '/films/b-frames.mp4', [[0.5, 1]])
  expect(prepared).toMatchObject({ way: 're-encoded', frames: 15, setbacks: [] })
  expect(output.codec).toBe('vp9')
  expect(output.codecString).toMatch(/^vp09\.00\./)
  expect(output.timesS).toHaveLength(15)
})

test('[film.2] hands the clip back when the worker cannot start', async ({ page }) => {
  await page.route('**/prepare.worker-*.js', route => route.fulfill({ contentType: 'text/javascript', body: 'throw new Error("no")' }))
  const { prepared } = await prepareOn(page, '/films/plain-30.mp4', [[0.2, 0.6]])
  expect(prepared).toMatchObject({ way: 'untouched', reason: undefined, swings: [[0.2, 0.6]] })
})

test('[film.2] keeps the prepared film in memory where the device gives no storage', async ({ page }) => {
  await inWorker(page, 'navigator.storage.getDirectory = () => Promise.reject(new DOMException("no", "SecurityError"));')
  const { prepared, output } = await prepareOn(page, '/films/b-frames.mp4', [])
  expect(prepared).toMatchObject({ way: 're-encoded', keptAs: undefined, setbacks: [] })
  expect(output.timesS).toHaveLength(60)
  expect(output.boxes.indexOf('moov')).toBeLessThan(output.boxes.indexOf('mdat'))
})

test('[film.2] writes to the device otherwise, and forgets the film when told to', async ({ page }) => {
  const { prepared } = await prepareOn(page, '/films/b-frames.mp4', [])
  expect(prepared.keptAs).toMatch(/^[0-9a-f-]{36}\.mp4$/)
  // The harness forgets it once its bytes are here.
  expect(await page.evaluate(() => globalThis.prepareHarness.listOnDevice())).toEqual([])
})

test('[film.2] stops when told to and leaves nothing behind', async ({ page }) => {
  const { thrown, doneFrames, totalFrames, leftOnDevice } = await page.evaluate(() => globalThis.prepareHarness.stop('/demo/right-three-face-on.mp4', [[0.01, 9]], 5))
  expect(thrown).toBe('AbortError')
  expect(doneFrames).toBeGreaterThanOrEqual(5)
  expect(doneFrames).toBeLessThan(totalFrames / 2)
  expect(leftOnDevice).toEqual([])
  await expect.poll(() => page.workers().length).toBe(0)
})
