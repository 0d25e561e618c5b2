/**
 * How far the club head moves from one frame to the next: speed / rate.
 *
 * @param speedMps 0 or above
 * @param framesPerSecond of real time, above 0
 * @returns metres
 * @throws RangeError for a rate or speed out of range
 */
export function headTravelPerFrameM(speedMps: number, framesPerSecond: number): number {
  assertSpeed(speedMps)
  if (!(framesPerSecond > 0))
    throw new RangeError('A film has more than 0 frames a second.')
  return speedMps / framesPerSecond
}

/**
 * How far the club head smears while one frame is exposed: speed × exposure.
 *
 * @param speedMps 0 or above
 * @param exposureS 0 or above; longer than the time between frames cannot be
 * @returns metres
 * @throws RangeError for an exposure or speed out of range
 */
export function blurM(speedMps: number, exposureS: number): number {
  assertSpeed(speedMps)
  if (!(exposureS >= 0))
    throw new RangeError('An exposure lasts 0 seconds or more.')
  return speedMps * exposureS
}

/**
 * The longest exposure that keeps the blur within a length.
 *
 * @param speedMps above 0
 * @param mostBlurM 0 or above
 * @returns seconds
 * @throws RangeError for a speed of 0 or less
 */
export function longestExposureS(speedMps: number, mostBlurM: number): number {
  if (!(speedMps > 0))
    throw new RangeError('Nothing that stands still has a longest exposure.')
  return mostBlurM / speedMps
}

/**
 * How well one frame alone tells the moment of impact: half the time between frames, either way.
 *
 * @param framesPerSecond of real time, above 0
 * @returns seconds
 * @throws RangeError for a rate of 0 or less
 */
export function impactTimeUncertaintyS(framesPerSecond: number): number {
  if (!(framesPerSecond > 0))
    throw new RangeError('A film has more than 0 frames a second.')
  return 1 / (2 * framesPerSecond)
}

function assertSpeed(speedMps: number): void {
  if (!(speedMps >= 0))
    throw new RangeError('A speed is 0 or more.')
}
