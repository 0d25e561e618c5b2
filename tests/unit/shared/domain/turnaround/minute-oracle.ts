import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'

/**
 * Working time told minute by minute: an array with one place for every minute, filled from the wall clock that
 * `Intl.DateTimeFormat` shows. Shares no code with what it checks, and no library either.
 */
export interface MinuteOracle {
  isWorking: (atMs: number) => boolean
  between: (fromMs: number, toMs: number) => number
  /** Undefined when the table ends first. */
  add: (startMs: number, ms: number) => number | undefined
}

const MINUTE_MS = 60_000
/** All offsets in use since 1980 change at quarter hours of UTC, and no zone changes twice within three hours. */
const STEP_MINUTES = 15
const BLOCK_MINUTES = 180
/** Further than any change moves the wall clock, so the search below begins before the minute it looks for. */
const SEARCH_AHEAD_MINUTES = 1500

export function minuteOracle(calendar: WorkingCalendar, originMs: number, minutes: number): MinuteOracle {
  const wall = wallMinutes(calendar.timeZone, originMs, minutes)
  const working = new Uint8Array(minutes)
  const firstDay = Math.floor(place(wall, 0) / 1440)
  const lastDay = Math.floor(place(wall, minutes - 1) / 1440)
  for (let day = firstDay; day <= lastDay; day += 1) {
    const weekday = new Date(day * 86_400_000).getUTCDay() || 7
    for (const hours of calendar.weekly) {
      if (hours.weekday !== weekday) continue
      working.fill(1, indexOfWall(wall, day * 1440 + hours.fromMinute), indexOfWall(wall, day * 1440 + hours.toMinute))
    }
  }
  for (const off of calendar.timeOff) {
    for (let index = 0; index < minutes; index += 1) {
      const atMs = originMs + index * MINUTE_MS
      if (atMs >= off.fromMs && atMs < off.toMs) working[index] = 0
    }
  }
  return readingOf(working, originMs)
}

function readingOf(working: Uint8Array, originMs: number): MinuteOracle {
  const isWorking = (atMs: number): boolean => working[Math.floor((atMs - originMs) / MINUTE_MS)] === 1
  return {
    isWorking,
    between(fromMs, toMs) {
      let sum = 0
      for (let atMs = fromMs; atMs < toMs;) {
        const nextMs = Math.min(nextMinute(atMs, originMs), toMs)
        if (isWorking(atMs)) sum += nextMs - atMs
        atMs = nextMs
      }
      return sum
    },
    add(startMs, ms) {
      let leftMs = ms
      const endMs = originMs + working.length * MINUTE_MS
      for (let atMs = startMs; atMs < endMs; atMs = nextMinute(atMs, originMs)) {
        if (leftMs === 0) return atMs
        if (!isWorking(atMs)) continue
        const roomMs = nextMinute(atMs, originMs) - atMs
        if (roomMs >= leftMs) return atMs + leftMs
        leftMs -= roomMs
      }
      return undefined
    },
  }
}

function nextMinute(atMs: number, originMs: number): number {
  return originMs + (Math.floor((atMs - originMs) / MINUTE_MS) + 1) * MINUTE_MS
}

/** The wall minute (counted from 1970-01-01 00:00 on the wall) shown at every minute of the table. */
function wallMinutes(timeZone: string, originMs: number, minutes: number): Float64Array {
  const format = new Intl.DateTimeFormat('en-US', {
    timeZone, hourCycle: 'h23', year: 'numeric', month: 'numeric', day: 'numeric', hour: 'numeric', minute: 'numeric',
  })
  const shownAt = (index: number): number => {
    const shown = new Map(format.formatToParts(originMs + index * MINUTE_MS).map(part => [part.type, Number(part.value)]))
    const read = (type: Intl.DateTimeFormatPartTypes): number => shown.get(type) ?? Number.NaN
    return Date.UTC(read('year'), read('month') - 1, read('day'), read('hour'), read('minute')) / MINUTE_MS
  }
  const wall = new Float64Array(minutes)
  const fill = (from: number, length: number, first: number): void => {
    for (let step = 0; step < length && from + step < minutes; step += 1) wall[from + step] = first + step
  }
  for (let block = 0; block < minutes; block += BLOCK_MINUTES) {
    const first = shownAt(block)
    if (shownAt(block + BLOCK_MINUTES) - first === BLOCK_MINUTES) fill(block, BLOCK_MINUTES, first)
    else for (let index = block; index < block + BLOCK_MINUTES; index += STEP_MINUTES) fill(index, STEP_MINUTES, shownAt(index))
  }
  return wall
}

/**
 * The first place that shows a wall minute. One that is skipped is counted on from the last minute before the gap. Before
 * the table 0, after it its length.
 */
function indexOfWall(wall: Float64Array, minute: number): number {
  if (minute < place(wall, 0)) return 0
  for (let index = Math.max(0, minute - place(wall, 0) - SEARCH_AHEAD_MINUTES); index < wall.length; index += 1) {
    const shown = place(wall, index)
    if (shown === minute) return index
    const isInGap = index > 0 && shown > minute && place(wall, index - 1) < minute
    if (isInGap) return index + (minute - place(wall, index - 1) - 1)
  }
  return wall.length
}

function place(wall: Float64Array, index: number): number {
  const minute = wall[index]
  if (minute === undefined || Number.isNaN(minute)) throw new Error(`no wall time at ${index}`)
  return minute
}
