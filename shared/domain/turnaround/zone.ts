import { Temporal } from 'temporal-polyfill'

export const MINUTE_MS = 60_000
export const DAY_MS = 86_400_000
export const MINUTES_A_DAY = 1440

/** Letters first: `+05:30` and bracketed date texts are zones to Temporal, but name no place whose clocks can change. */
const ZONE_NAME = /^[A-Z][\w+\-/]*$/i

/**
 * A conversion costs about 10 µs and a queue page asks for the same few hundred again and again, so they are kept.
 * The answer depends on the arguments alone; keeping it changes nothing but the time taken.
 */
const keptInstants = new Map<string, Map<number, number>>()
const KEPT_PER_ZONE = 50_000
const KEPT_ZONES = 64

/** Whether this machine knows the IANA zone. Fixed offsets such as `+05:30` are refused; `UTC` is known. */
export function isTimeZone(name: string): boolean {
  if (!ZONE_NAME.test(name)) return false
  try {
    Temporal.Instant.fromEpochMilliseconds(0).toZonedDateTimeISO(name)
    return true
  }
  catch {
    return false
  }
}

/** ISO weekday, 1 (Monday) to 7, of a day counted from 1970-01-01, which was a Thursday. Days before it are negative. */
export function weekdayOf(epochDay: number): number {
  return ((epochDay + 3) % 7 + 7) % 7 + 1
}

/**
 * The instant at which clocks in `timeZone` show `minute` (0 to 1440) past midnight of the local date `epochDay`
 * (days from 1970-01-01). 1440 is midnight of the next date.
 *
 * Daylight saving follows Temporal's `compatible` rule, which is also RFC 5545 §3.3.5: a wall time that happens twice
 * means the first; one that is skipped is read with the offset before the gap, so it lands that much later.
 * Throws RangeError for an unknown zone or a day outside Temporal's range.
 */
export function wallInstantMs(timeZone: string, epochDay: number, minute: number): number {
  const wallMinute = epochDay * MINUTES_A_DAY + minute
  const kept = keptOf(timeZone)
  const found = kept.get(wallMinute)
  if (found !== undefined) return found
  const wall = Temporal.Instant.fromEpochMilliseconds(wallMinute * MINUTE_MS).toZonedDateTimeISO('UTC').toPlainDateTime()
  const instantMs = wall.toZonedDateTime(timeZone, { disambiguation: 'compatible' }).epochMilliseconds
  if (kept.size >= KEPT_PER_ZONE) kept.clear()
  kept.set(wallMinute, instantMs)
  return instantMs
}

/** The local date at an instant, in days from 1970-01-01. Throws RangeError for an unknown zone. */
export function epochDayAt(timeZone: string, atMs: number): number {
  const utcDay = Math.floor(atMs / DAY_MS)
  // No zone is a whole day from UTC, so the local date is one of three; midnights are kept, a conversion is not.
  for (const epochDay of [utcDay + 1, utcDay]) {
    if (wallInstantMs(timeZone, epochDay, 0) <= atMs) return epochDay
  }
  return utcDay - 1
}

function keptOf(timeZone: string): Map<number, number> {
  const found = keptInstants.get(timeZone)
  if (found) return found
  if (keptInstants.size >= KEPT_ZONES) keptInstants.clear()
  const kept = new Map<number, number>()
  keptInstants.set(timeZone, kept)
  return kept
}
