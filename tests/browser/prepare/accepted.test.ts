import { examineFilm } from '#server/features/film/reading/examine-film'
import { RangeReader } from '#server/features/film/reading/range-reader'
import { startRangeServer } from '#tests/support/film/range-server'
import type { SpanS } from '~/film/prepare'
import { expect, inWorker, prepareOn, test } from './fixtures'

/** What the server makes of a film in its store. */
async function judge(bytes: Uint8Array) {
  const store = await startRangeServer()
  try {
    return await examineFilm(new RangeReader({ url: store.put('film', bytes), bytes: bytes.length }))
  }
  finally {
    await store.close()
  }
}

const KEEP: SpanS[] = [[0.2, 0.6], [0.7, 0.9]]

for (const name of ['with-sound.mp4', 'place-in-keys.mov', 'place-in-user-data.mp4', 'place.webm', 'ten-bit.mp4', 'uneven.mov', 'edit-list.mp4', 'rotated-90.mov']) {
  test(`[film.2] the server takes ${name} once it is prepared, as the page described it`, async ({ page }) => {
    const { prepared, output, bytes } = await prepareOn(page, `/films/${name}`, KEEP)
    const reading = await judge(bytes)
    if (reading.kind !== 'accepted') throw new Error(`${reading.reason}: ${reading.detail}`)
    expect(reading.film).toMatchObject({ container: 'mp4', codec: 'avc', frameCount: prepared.frames, rotationDeg: 0, hasSound: false, hasLocation: false, deviceTags: [] })
    expect([reading.film.widthPx, reading.film.heightPx]).toEqual(output.size)
    expect(reading.film.durationMs / 1000).toBeCloseTo(prepared.spans.at(-1)?.newS[1] ?? NaN, 2)
  })
}

for (const [what, lines] of Object.entries({
  'copied whole': 'delete self.VideoEncoder;',
  'made in memory': 'navigator.storage.getDirectory = () => Promise.reject(new DOMException("no", "SecurityError"));',
  'made as VP9': 'const asked = VideoEncoder.isConfigSupported.bind(VideoEncoder); VideoEncoder.isConfigSupported = config => config.codec.startsWith("avc") ? Promise.resolve({ supported: false, config }) : asked(config);',
})) {
  test(`[film.2] the server takes a film that was ${what}`, async ({ page }) => {
    await inWorker(page, lines)
    for (const name of ['with-sound.mp4', 'edit-list.mp4', 'uneven.mov']) {
      const { prepared, bytes } = await prepareOn(page, `/films/${name}`, KEEP)
      const reading = await judge(bytes)
      expect(reading, name).toMatchObject({ kind: 'accepted', film: { frameCount: prepared.frames, hasSound: false, hasLocation: false } })
    }
  })
}
