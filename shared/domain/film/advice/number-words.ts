/** `14 cm`, `1.3 m`, `under 1 cm`: two figures, which is all that an estimated speed bears. */
export function distanceWords(distanceM: number): string {
  const cm = Math.round(distanceM * 100)
  if (cm < 1)
    return 'under 1 cm'
  return cm < 100 ? `${cm} cm` : `${(cm / 100).toFixed(1)} m`
}

/** `30`, `29.97` as `30`, `239.8` as `240`: nobody films at a fraction on purpose. */
export function rateWords(framesPerSecond: number): string {
  return String(Math.round(framesPerSecond))
}

/** `3.1 mm`, `12 mm`. */
export function millimetreWords(millimetres: number): string {
  return `${millimetres < 10 ? millimetres.toFixed(1) : Math.round(millimetres)} mm`
}

/** `240`, `120 or 240`, `120, 240 or 480`. */
export function orWords(rates: readonly number[]): string {
  const words = rates.map(rateWords)
  const last = words.pop() ?? ''
  return words.length === 0 ? last : `${words.join(', ')} or ${last}`
}
