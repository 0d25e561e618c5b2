import { INCH_M } from '#shared/domain/clubs/defaults'

export type LengthUnit = 'in' | 'cm'
export type CarryUnit = 'yd' | 'm'

const METRES: Readonly<Record<LengthUnit | CarryUnit, number>> = { in: INCH_M, cm: 0.01, yd: 0.9144, m: 1 }

/** Metres as a number to type over: two decimals at most, none that say nothing. Empty for null. */
export function measureText(metres: number | null, unit: LengthUnit | CarryUnit): string {
  return metres === null ? '' : String(Math.round(metres / METRES[unit] * 100) / 100)
}

/** Metres out of what was typed; null for nothing, NaN for what is no number. A comma counts as a point. */
export function readMeasure(text: string, unit: LengthUnit | CarryUnit): number | null {
  const value = readNumber(text)
  // A hair of rounding would put 48 inches over the limit of 48 inches.
  return value === null ? null : Math.round(value * METRES[unit] * 1e6) / 1e6
}

/** Null for nothing, NaN for what is no number. A comma counts as a point. */
export function readNumber(text: string): number | null {
  const trimmed = text.trim().replace(',', '.')
  return trimmed === '' ? null : Number(trimmed)
}
