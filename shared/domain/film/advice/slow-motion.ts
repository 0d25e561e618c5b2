import { FILM_MAX_DURATION_MS, FILM_MAX_FRAMES_PER_SECOND } from '../limits'

/**
 * Time from top to impact of a full swing in real seconds: wider than the 0.23 to 0.33 s of Grober & Cholewicki,
 * arXiv physics/0611291 (2006), so that slow and quick golfers pass.
 */
export const DOWNSWING_S = { min: 0.2, max: 0.4 }

/** Rates phones film slow motion at, for a question with few answers. */
const PHONE_RATES = [120, 240, 480, 960]

/** Rates that differ by less are one rate: 29.97 is 30, and phones drift by a frame or two. */
const SAME_RATE_SHARE = 0.05

/** Android stretches frames only when the two rates differ by more than twice (frameworks/av, commit 5a4a0a1). */
const STRETCHED_FROM_RATIO = 2

/** No phone plays a stretched file this fast, so the times of such a file are real. */
const PLAYS_REAL_FROM_FRAMES_PER_SECOND = 100

export interface SlowMotionSigns {
  /** As the file plays. */
  framesPerSecond: number
  /** `com.android.capture.fps` of the file. */
  captureFramesPerSecond: number | undefined
  /** What the student says it was filmed at; goes before what the file says. */
  saidFramesPerSecond?: number
  /** Top to impact of a full swing, in the file's own time. */
  downswingFileS?: number
}

export type SlowMotionReason
  /** Nothing tells whether the file plays as it was filmed. */
  = | 'no-rate-in-file'
  /** The file names a rate that a phone may or may not have stretched. */
    | 'rate-unclear'
  /** Played faster than filmed, as time-lapse is. */
    | 'faster-than-filmed'
  /** The downswing would be shorter or longer than a golfer's. */
    | 'downswing-does-not-fit'

export type SlowMotion
  = | { kind: 'real-time', realTimeFactor: 1 }
    /** Real time = file time × factor; below 1. */
    | { kind: 'slowed-by-known-factor', realTimeFactor: number }
    | SlowMotionQuestion

export interface SlowMotionQuestion {
  kind: 'ask'
  reason: SlowMotionReason
  /** What the student or the file said it was filmed at, when either did. */
  filmedFramesPerSecond: number | undefined
  /** The downswing in real seconds if that were so, or as the file plays when neither did; undefined when not measured. */
  downswingS: number | undefined
  /** Rates a phone films at that would make the downswing fit, lowest first. */
  fittingFramesPerSecond: number[]
}

/**
 * Whether a film plays in real time, and if not, by how much it is slowed.
 *
 * Android keeps the true rate in the file and stretches the frames: real time = file time × playing rate / capture rate.
 * Others keep true times, or lose the rate when a film is shared: then a downswing of 0.2 to 0.4 s (give or take a frame)
 * settles it, or the student is asked. Nothing is guessed.
 *
 * @param signs a rate outside 1 to 1000 a second and a downswing longer than a film count as unknown
 */
export function findSlowMotion(signs: SlowMotionSigns): SlowMotion {
  const playing = believed(signs.framesPerSecond)
  const said = believed(signs.saidFramesPerSecond)
  const filmed = said ?? believed(signs.captureFramesPerSecond)
  const downswingFileS = believedDownswing(signs.downswingFileS)
  if (playing === undefined)
    return { kind: 'ask', reason: 'no-rate-in-file', filmedFramesPerSecond: filmed, downswingS: undefined, fittingFramesPerSecond: [] }
  const factor = filmed === undefined ? 1 : playing / filmed
  const ask = (reason: SlowMotionReason): SlowMotionQuestion => ({
    kind: 'ask',
    reason,
    filmedFramesPerSecond: filmed,
    downswingS: downswingFileS === undefined ? undefined : downswingFileS * factor,
    fittingFramesPerSecond: fittingRates(playing, downswingFileS),
  })
  if (factor > 1 + SAME_RATE_SHARE)
    return ask('faster-than-filmed')
  const finding: SlowMotion = factor >= 1 - SAME_RATE_SHARE
    ? { kind: 'real-time', realTimeFactor: 1 }
    : { kind: 'slowed-by-known-factor', realTimeFactor: factor }
  if (downswingFileS !== undefined)
    return fits(downswingFileS, finding.realTimeFactor, playing) ? finding : ask('downswing-does-not-fit')
  if (filmed === undefined)
    return playing >= PLAYS_REAL_FROM_FRAMES_PER_SECOND ? finding : ask('no-rate-in-file')
  const isUnclear = said === undefined && finding.kind === 'slowed-by-known-factor' && 1 / factor <= STRETCHED_FROM_RATIO * (1 + SAME_RATE_SHARE)
  return isUnclear ? ask('rate-unclear') : finding
}

/** Whether a film can have this many frames a second: 1 to 1000. */
export function isBelievableRate(framesPerSecond: number): boolean {
  return framesPerSecond >= 1 && framesPerSecond <= FILM_MAX_FRAMES_PER_SECOND
}

/** Top and impact are each told to half a frame, so their distance to one. */
function fits(downswingFileS: number, factor: number, playing: number): boolean {
  const realS = downswingFileS * factor
  const frameS = factor / playing
  return realS >= DOWNSWING_S.min - frameS && realS <= DOWNSWING_S.max + frameS
}

function fittingRates(playing: number, downswingFileS: number | undefined): number[] {
  if (downswingFileS === undefined)
    return []
  return PHONE_RATES.filter(rate => rate > playing * (1 + SAME_RATE_SHARE) && fits(downswingFileS, playing / rate, playing))
}

function believed(framesPerSecond: number | undefined): number | undefined {
  return framesPerSecond !== undefined && isBelievableRate(framesPerSecond) ? framesPerSecond : undefined
}

function believedDownswing(downswingFileS: number | undefined): number | undefined {
  return downswingFileS !== undefined && downswingFileS > 0 && downswingFileS * 1000 <= FILM_MAX_DURATION_MS ? downswingFileS : undefined
}
