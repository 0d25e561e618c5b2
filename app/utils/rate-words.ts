/** `240 frames a second`, or `240 frames a second, played at 30` for slow motion that the phone stretched. */
export function filmedRateWords(framesPerSecond: number, filmedFramesPerSecond: number | undefined): string {
  const plays = Math.round(framesPerSecond)
  const filmed = Math.round(filmedFramesPerSecond ?? framesPerSecond)
  return filmed === plays ? `${plays} frames a second` : `${filmed} frames a second, played at ${plays}`
}
