import type { AdvisedFilm, Advice, FilmContext } from './context'
import { VIEW_CLIP_WORDS } from './context'
import { distanceWords, orWords, rateWords } from './number-words'
import type { SlowMotion, SlowMotionQuestion } from './slow-motion'
import { DOWNSWING_S, isBelievableRate } from './slow-motion'
import { estimateHeadSpeed } from './speed'
import { headTravelPerFrameM } from './travel'

/** Here a usual driver moves 34 cm between frames and a 7-iron 28. */
export const FINE_FRAMES_PER_SECOND = 120

/** At this rate a usual driver moves 67 cm between frames and a lob wedge 54. */
export const WEAK_FRAMES_PER_SECOND = 60

/** `measuring.md`, low point: refused under 100 frames a second. */
const LOW_POINT_FRAMES_PER_SECOND = 100

/** What a club golfer's 7-iron moves at 240; a slower head, as of a putter, is as well shown by fewer frames. */
const FINE_TRAVEL_M = 0.15

/** Phones film 119.88 and call it 120. */
const RATE_SLACK = 0.99

/** From address to finish a swing takes longer: start to impact alone is 0.9 to 1.3 s (Grober & Cholewicki 2006). */
const SHORTEST_SWING_S = 1.5

/**
 * How far the club head moves between frames, and what that shows.
 *
 * @param framesPerSecond of real time
 * @returns undefined for a rate that no film has
 */
export function adviseOnHeadTravel(framesPerSecond: number, context: FilmContext): Advice | undefined {
  if (!isBelievableRate(framesPerSecond))
    return undefined
  const speed = estimateHeadSpeed(context.club, context.usualCarryM)
  const travelM = speed && headTravelPerFrameM(speed.speedMps, framesPerSecond)
  const isAtLeast = (rate: number): boolean => framesPerSecond >= rate * RATE_SLACK
  if (isAtLeast(FINE_FRAMES_PER_SECOND) || (travelM !== undefined && travelM <= FINE_TRAVEL_M)) {
    const moves = travelM === undefined ? `${rateWords(framesPerSecond)} frames a second` : `The club head moves about ${distanceWords(travelM)} between frames`
    return { key: 'head-travel', tone: 'good', words: `${moves}: fine for impact.` }
  }
  const moves = travelM === undefined ? 'The club head moves far between frames' : `The club head moves ${distanceWords(travelM)} between frames`
  const isWeak = !isAtLeast(WEAK_FRAMES_PER_SECOND)
  const impact = isWeak ? 'impact may not be visible' : 'impact may fall between two of them'
  const lowPoint = !isWeak && context.view === 'face_on' && !isAtLeast(LOW_POINT_FRAMES_PER_SECOND) ? ' and the low point cannot be measured' : ''
  return {
    key: 'head-travel',
    tone: 'improve',
    words: `Your ${VIEW_CLIP_WORDS[context.view]} is ${rateWords(framesPerSecond)} frames a second. ${moves}, so ${impact}${lowPoint}.`,
    whatToDo: isWeak
      ? 'Film again at 120 or more, which phones call slow motion, or send it as it is.'
      : 'Film again at 120 or more if your phone can, or send it as it is.',
  }
}

/** What is known of slow motion; nothing to say of a film that plays in real time. */
export function adviseOnSlowMotion(film: AdvisedFilm, finding: SlowMotion): Advice | undefined {
  if (finding.kind === 'real-time')
    return undefined
  if (finding.kind === 'slowed-by-known-factor') {
    const filmed = film.framesPerSecond / finding.realTimeFactor
    return { key: 'slow-motion', tone: 'good', words: `Slow motion, filmed at ${rateWords(filmed)} frames a second: times are counted in real seconds.` }
  }
  return { key: 'slow-motion', tone: 'ask', ...askWords(film.framesPerSecond, finding) }
}

/** A swing needs its address and its finish. */
export function adviseOnDuration(realDurationS: number): Advice | undefined {
  if (!(realDurationS > 0) || realDurationS >= SHORTEST_SWING_S)
    return undefined
  return {
    key: 'too-short',
    tone: 'improve',
    words: `The clip lasts ${realDurationS.toFixed(1)} seconds, so address or finish may be missing.`,
    whatToDo: 'Keep a second or two before the club starts back and after it ends, or send it as it is.',
  }
}

function askWords(playing: number, finding: SlowMotionQuestion): Pick<Advice, 'words' | 'whatToDo'> {
  const filmed = rateWords(finding.filmedFramesPerSecond ?? playing)
  switch (finding.reason) {
    case 'no-rate-in-file':
      return { words: 'The file does not say whether this is slow motion.', whatToDo: 'If it is, say at how many frames a second it was filmed. If it plays at normal speed, say that.' }
    case 'rate-unclear':
      return { words: `The file names ${filmed} frames a second and plays at ${rateWords(playing)}; that may or may not be slow motion.`, whatToDo: 'Say whether it plays slowed down or at normal speed.' }
    case 'faster-than-filmed':
      return { words: `The film plays at ${rateWords(playing)} frames a second but was filmed at ${filmed}, as time-lapse is.`, whatToDo: 'If it plays at normal speed, say that. Otherwise film again without time-lapse.' }
    case 'downswing-does-not-fit':
      return downswingWords(finding)
  }
}

function downswingWords(finding: SlowMotionQuestion): Pick<Advice, 'words' | 'whatToDo'> {
  const { filmedFramesPerSecond, fittingFramesPerSecond: fitting } = finding
  const lasts = `${(finding.downswingS ?? 0).toFixed(2)} seconds`
  const range = `a full one takes ${DOWNSWING_S.min} to ${DOWNSWING_S.max}`
  return {
    words: filmedFramesPerSecond === undefined
      ? `The downswing lasts ${lasts} in this film; ${range}.`
      : `Filmed at ${rateWords(filmedFramesPerSecond)} frames a second, the downswing would last ${lasts}; ${range}.`,
    whatToDo: `Say at how many frames a second it was filmed${fitting.length > 0 ? `; ${orWords(fitting)} would fit` : ''}.`,
  }
}
