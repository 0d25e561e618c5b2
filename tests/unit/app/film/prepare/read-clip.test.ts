import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { addToIndex, metadata } from '#tests/support/film/boxes'
import { readMadeFilm, readTruth } from '#tests/support/film/films'
import { ClipProblem, findClipProblem } from '~/film/prepare/clip-problem'
import { readClip } from '~/film/prepare/read-clip'

const FILMS = ['b-frames.mp4', 'edit-list.mp4', 'faststart-30.mp4', 'fragmented.mp4', 'hevc.mp4', 'live.webm', 'negative-offsets.mp4', 'ntsc-29.97.mp4', 'plain-30.mp4', 'rotated-90.mov', 'slow-240.mp4', 'ten-bit.mp4', 'uneven.mov', 'vp8-with-sound.webm', 'vp9.webm', 'with-sound.mp4']

function blobOf(name: string): Blob {
  return new Blob([new Uint8Array(readMadeFilm(name))])
}

async function factsOf(film: Blob) {
  const clip = await readClip(film)
  clip.input.dispose()
  return clip.facts
}

async function problemOf(film: Blob): Promise<string> {
  try {
    await factsOf(film)
    return 'none'
  }
  catch (error) {
    return error instanceof ClipProblem ? error.reason : String(error)
  }
}

/** Android writes the rate as a 32-bit float, type 23 (QuickTime File Format, well-known types). */
function filmedAt(framesPerSecond: number): Blob {
  const value = Buffer.alloc(4)
  value.writeFloatBE(framesPerSecond)
  return new Blob([new Uint8Array(addToIndex(readMadeFilm('plain-30.mp4'), metadata('com.android.capture.fps', 23, value)))])
}

// Node's own global is missing where nothing decodes; the reader must not need it.
beforeAll(() => { vi.stubGlobal('VideoDecoder', undefined) })
afterAll(() => { vi.unstubAllGlobals() })

describe('readClip', () => {
  it.each(FILMS)('finds the frame times of %s that ffprobe shows', async (name) => {
    const facts = await factsOf(blobOf(name))
    const truth = readTruth(name)
    expect(facts.timeBase).toBe(truth.timeBase)
    expect(facts.frameTicks).toEqual(truth.ticks)
    expect(facts).toMatchObject({ canDecode: false, encoder: undefined })
  })

  it('reads the rate that slow motion was filmed at', async () => {
    expect((await factsOf(filmedAt(240))).captureFramesPerSecond).toBe(240)
    expect((await factsOf(filmedAt(Number.NaN))).captureFramesPerSecond).toBeUndefined()
    expect((await factsOf(blobOf('slow-240.mp4'))).captureFramesPerSecond).toBeUndefined()
  })

  it('names what is no film, cut short or without moving picture', async () => {
    expect(await problemOf(new Blob([new Uint8Array(readFileSync('tests/support/film/made/truth.json'))]))).toBe('not-video')
    expect(await problemOf(new Blob([]))).toBe('not-video')
    expect(await problemOf(blobOf('sound-only.mp4'))).toBe('not-video')
    expect(await problemOf(blobOf('one-frame.mp4'))).toBe('no-frames')
    const cut = readMadeFilm('faststart-30.mp4')
    expect(['unreadable', 'not-video']).toContain(await problemOf(new Blob([new Uint8Array(cut.subarray(0, 600))])))
  })
})

describe('findClipProblem', () => {
  it('lets pass what preparing takes away', async () => {
    const facts = await factsOf(blobOf('with-sound.mp4'))
    expect(findClipProblem({ ...facts, hasLocation: true, durationMs: 90_000, bytes: 2 ** 40 })).toBeUndefined()
  })

  it('lets pass a codec that this browser can make into another', async () => {
    const facts = await factsOf(blobOf('hevc.mp4'))
    expect(findClipProblem(facts)).toBe('codec-not-shown')
    expect(findClipProblem({ ...facts, canDecode: true })).toBe('codec-not-shown')
    expect(findClipProblem({ ...facts, canDecode: true, encoder: { codec: 'avc', framesPerSecond: 30 } })).toBeUndefined()
  })

  it('does not let pass too few frames', async () => {
    const facts = await factsOf(blobOf('fifteen.mp4'))
    expect(findClipProblem({ ...facts, canDecode: true, encoder: { codec: 'avc', framesPerSecond: 15 } })).toBe('too-few-frames-a-second')
  })
})
