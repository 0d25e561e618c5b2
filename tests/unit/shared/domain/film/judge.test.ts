import type { FilmFacts } from '#shared/domain/film/reading'
import type { FilmRefusal } from '#shared/domain/film/refusals'
import { describe, expect, it } from 'vitest'
import { isShownByBrowsers, judgeFilm } from '#shared/domain/film/judge'
import { FILM_MAX_BYTES, FILM_MAX_DURATION_MS, FILM_MIN_FRAMES_PER_SECOND } from '#shared/domain/film/limits'

const GOOD: FilmFacts = {
  container: 'mp4',
  bytes: 20_000_000,
  codec: 'avc',
  codecString: 'avc1.640028',
  widthPx: 1080,
  heightPx: 1920,
  rotationDeg: 90,
  durationMs: 8000,
  frameCount: 1920,
  framesPerSecond: 240,
  timeBase: 57600,
  frameTicks: [0, 240, 480],
  captureFramesPerSecond: undefined,
  hasSound: false,
  hasLocation: false,
  deviceTags: [],
}

const REFUSED: [FilmRefusal, Partial<FilmFacts>][] = [
  ['too-large', { bytes: FILM_MAX_BYTES + 1 }],
  ['no-frames', { frameCount: 1, frameTicks: [0] }],
  ['no-frames', { frameCount: 0, frameTicks: [] }],
  ['codec-not-shown', { codec: 'hevc', codecString: 'hvc1.1.6.L93.B0' }],
  ['too-long', { durationMs: FILM_MAX_DURATION_MS + 1 }],
  ['too-few-frames-a-second', { framesPerSecond: 23.49 }],
  ['too-few-frames-a-second', { captureFramesPerSecond: 1 }],
  ['has-location', { hasLocation: true }],
  ['has-sound', { hasSound: true }],
]

describe('judgeFilm', () => {
  it('takes a film that keeps every limit', () => {
    expect(judgeFilm(GOOD)).toBeUndefined()
  })

  it('takes a film exactly at each limit', () => {
    expect(judgeFilm({ ...GOOD, bytes: FILM_MAX_BYTES, durationMs: FILM_MAX_DURATION_MS, framesPerSecond: FILM_MIN_FRAMES_PER_SECOND, frameCount: 2 })).toBeUndefined()
  })

  it.each(REFUSED)('refuses with %s when %o', (reason, change) => {
    expect(judgeFilm({ ...GOOD, ...change })).toBe(reason)
  })

  it('takes the 23.976 frames a second of cinema cameras', () => {
    expect(judgeFilm({ ...GOOD, framesPerSecond: 24000 / 1001 })).toBeUndefined()
  })

  it('takes slow motion that plays at 30 and was filmed at 240', () => {
    expect(judgeFilm({ ...GOOD, framesPerSecond: 30, captureFramesPerSecond: 240 })).toBeUndefined()
  })

  it('does not let the tag of slow motion excuse a film that plays at 15', () => {
    expect(judgeFilm({ ...GOOD, framesPerSecond: 15, captureFramesPerSecond: 240 })).toBe('too-few-frames-a-second')
  })

  it('tells first what must be filmed again, then what must be sent again', () => {
    expect(judgeFilm({ ...GOOD, hasSound: true, hasLocation: true, framesPerSecond: 15 })).toBe('too-few-frames-a-second')
    expect(judgeFilm({ ...GOOD, hasSound: true, hasLocation: true })).toBe('has-location')
  })
})

describe('isShownByBrowsers', () => {
  // Profiles of H.264 annex A, in hexadecimal as RFC 6381 writes them: 66 Baseline, 77 Main, 88 Extended, 100 High,
  // 110 High 10, 122 High 4:2:2, 244 High 4:4:4.
  it.each([
    ['avc', 'avc1.42E01E', true],
    ['avc', 'avc1.4d401f', true],
    ['avc', 'avc3.640028', true],
    ['avc', 'avc1.58001e', false],
    ['avc', 'avc1.6e0028', false],
    ['avc', 'avc1.7a0028', false],
    ['avc', 'avc1.f40028', false],
    ['avc', '', false],
    ['vp8', 'vp8', true],
    ['vp9', 'vp09.00.10.08', true],
    ['vp9', 'vp09.01.10.08', false],
    ['av1', 'av01.0.04M.08', true],
    ['av1', 'av01.2.04M.12', false],
    ['hevc', 'hev1.1.6.L93.B0', false],
    ['prores', 'apcn', false],
    ['unknown', 'mp4v', false],
  ] as const)('%s %s: %s', (codec, codecString, expected) => {
    expect(isShownByBrowsers({ codec, codecString })).toBe(expected)
  })
})
