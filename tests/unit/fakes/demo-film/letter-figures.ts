import type { LetterDraft } from '#shared/types/reviews'
import type { SwingTruth } from '#fakes/demo/film/measured-truth'

/** What a figure with this unit may be, of all that is known of a clip's swings. */
const KNOWN: Readonly<Record<string, (swing: SwingTruth) => Array<number | undefined>>> = {
  'cm': ({ faceOn }) => [faceOn?.gripEndOffsetCm, faceOn?.gripEndOffsetLastFrameCm, faceOn?.lowPointCm],
  '°': ({ faceOn }) => [faceOn?.shaftLeanDeg, faceOn?.forearmToShaftDeg],
  'degrees': ({ faceOn }) => [faceOn?.shaftLeanDeg, faceOn?.forearmToShaftDeg],
  's': ({ backswingS, downswingS }) => [backswingS, downswingS],
  'seconds': ({ backswingS, downswingS }) => [backswingS, downswingS],
  'to 1': ({ tempo }) => [tempo],
  'm/s': ({ headSpeedMps }) => [headSpeedMps],
}

const FIGURE = /([-−+]?\d+(?:\.\d+)?)\s?(cm|°|degrees|m\/s|seconds|to 1|s)(?![a-z])/g

/** Figures with a unit of measuring in the part of a letter that says what was seen. */
export function figuresOf({ title, leaveAlone, saw, why, oneChange }: LetterDraft): Array<{ value: number, decimals: number, unit: string }> {
  return [title, leaveAlone, saw, why, oneChange].flatMap(text => [...text.matchAll(FIGURE)].map(([, number = '', unit = '']) => ({
    value: Math.abs(Number(number.replace('−', '-'))),
    decimals: number.split('.')[1]?.length ?? 0,
    unit,
  })))
}

/** Figures that no swing of the clips bears out when rounded as the letter rounds them; a letter says "behind" instead of a sign. */
export function unsupportedFigures(letter: LetterDraft, swings: readonly SwingTruth[]): string[] {
  return figuresOf(letter)
    .filter(({ value, decimals, unit }) => !swings.flatMap(swing => KNOWN[unit]?.(swing) ?? []).some(known => known !== undefined && Math.abs(known).toFixed(decimals) === value.toFixed(decimals)))
    .map(({ value, unit }) => `${value} ${unit}`)
}
