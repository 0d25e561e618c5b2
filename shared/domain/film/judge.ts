import type { FilmFacts } from './reading'
import type { FilmRefusal } from './refusals'
import { FILM_MAX_BYTES, FILM_MAX_DURATION_MS, FILM_MIN_FRAMES_PER_SECOND } from './limits'

/** Baseline, Main and High: 8 bits a colour, the profiles every browser decodes (ITU-T H.264, annex A: 66, 77, 100). */
const SHOWN_AVC_PROFILES = ['42', '4d', '64']

/**
 * Whether a film may be kept.
 *
 * What must be filmed again is told before what must be sent again, so that nobody removes the sound of a film
 * that is refused afterwards anyway.
 *
 * @returns the first reason against it, or undefined for a film that is taken
 */
export function judgeFilm(facts: FilmFacts): FilmRefusal | undefined {
  if (facts.bytes > FILM_MAX_BYTES)
    return 'too-large'
  if (facts.frameCount < 2)
    return 'no-frames'
  if (!isShownByBrowsers(facts))
    return 'codec-not-shown'
  if (facts.durationMs > FILM_MAX_DURATION_MS)
    return 'too-long'
  // A capture rate below the playing rate is a time-lapse: it plays smoothly and shows almost nothing of a swing.
  if (Math.min(facts.framesPerSecond, facts.captureFramesPerSecond ?? Infinity) < FILM_MIN_FRAMES_PER_SECOND)
    return 'too-few-frames-a-second'
  if (facts.hasLocation)
    return 'has-location'
  if (facts.hasSound)
    return 'has-sound'
  return undefined
}

/**
 * Whether the browsers people have show this codec: H.264 with 8 bits, VP8, VP9 profiles 0 and 2, AV1 main.
 * HEVC is left out on purpose: it needs hardware that the coach's machine may not have.
 */
export function isShownByBrowsers(facts: Pick<FilmFacts, 'codec' | 'codecString'>): boolean {
  switch (facts.codec) {
    case 'avc': {
      const profile = /^avc[13]\.([0-9a-f]{2})[0-9a-f]{4}$/i.exec(facts.codecString)?.[1]
      return profile !== undefined && SHOWN_AVC_PROFILES.includes(profile.toLowerCase())
    }
    case 'vp8':
      return true
    case 'vp9':
      return /^vp09\.0[02]\./.test(facts.codecString)
    case 'av1':
      return facts.codecString.startsWith('av01.0.')
    default:
      return false
  }
}
