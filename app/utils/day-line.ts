import type { QueueSpan } from '#shared/types/reviews'
import { formatDay, formatHour } from '#shared/utils/times'

/** Screen maths of the day line: many spans of time on one axis, nights drawn narrower than they are. */

export interface TimeSpan {
  fromMs: number
  toMs: number
}

export interface DayAxis {
  fromMs: number
  toMs: number
  /** Times in which nobody on this axis works; drawn as bands. */
  nights: TimeSpan[]
  /** Share of the width, 0 to 1; what lies outside is put at the nearer edge. */
  position: (atMs: number) => number
}

export interface AxisLabel {
  atMs: number
  /** Share of the width, 0 to 1. */
  position: number
  text: string
  /** True for an hour within a day, the first to go where there is little room. */
  isHour: boolean
}

const HOUR_MS = 3_600_000
/** A longer night is drawn as wide as this, so that the working hours keep their room over a weekend. */
export const NIGHT_SHOWN_MAX_MS = 4 * HOUR_MS
/** Shorter breaks are gaps in a bar, not bands behind all rows. */
const NIGHT_MIN_MS = 3 * HOUR_MS
const EDGE_SHARE = 0.02
const LABELLED_HOURS = [9, 13, 18]

/**
 * One axis for all rows: from the earliest start to the latest promise, `nowMs` included.
 * @param rows spans of each row, any order; an empty list gives two hours around now
 */
export function layDayAxis(rows: readonly (readonly QueueSpan[])[], nowMs: number): DayAxis {
  const spans = rows.flat()
  const firstMs = Math.min(nowMs - HOUR_MS, ...spans.map(span => span.fromMs))
  const lastMs = Math.max(nowMs + HOUR_MS, ...spans.map(span => span.toMs))
  const nights = findNights(spans)
  const drawn = (atMs: number) => drawnMs(firstMs, atMs, nights)
  const widthMs = drawn(lastMs)
  return {
    fromMs: firstMs,
    toMs: lastMs,
    nights,
    position: (atMs) => {
      const inside = Math.min(lastMs, Math.max(firstMs, atMs))
      return EDGE_SHARE + (1 - 2 * EDGE_SHARE) * (drawn(inside) / widthMs)
    },
  }
}

/** Off for somebody and worked by nobody, three hours or longer; coaches keep different hours. */
export function findNights(spans: readonly QueueSpan[]): TimeSpan[] {
  const off = joinSpans(spans.filter(span => span.kind === 'off' || span.kind === 'left-off'))
  const worked = joinSpans(spans.filter(span => span.kind === 'worked' || span.kind === 'left'))
  return off.flatMap(span => takeAway(span, worked)).filter(span => span.toMs - span.fromMs >= NIGHT_MIN_MS)
}

/** Joins spans that overlap or touch; the result is in order of time. */
export function joinSpans(spans: readonly TimeSpan[]): TimeSpan[] {
  const joined: TimeSpan[] = []
  for (const span of [...spans].sort((a, b) => a.fromMs - b.fromMs)) {
    const last = joined.at(-1)
    if (last !== undefined && span.fromMs <= last.toMs) last.toMs = Math.max(last.toMs, span.toMs)
    else joined.push({ fromMs: span.fromMs, toMs: span.toMs })
  }
  return joined
}

function takeAway(span: TimeSpan, others: readonly TimeSpan[]): TimeSpan[] {
  let left: TimeSpan[] = [span]
  for (const other of others) {
    left = left.flatMap(piece => [
      { fromMs: piece.fromMs, toMs: Math.min(piece.toMs, other.fromMs) },
      { fromMs: Math.max(piece.fromMs, other.toMs), toMs: piece.toMs },
    ].filter(part => part.toMs > part.fromMs))
  }
  return left
}

/** Milliseconds from the axis's start as drawn: nights count for at most `NIGHT_SHOWN_MAX_MS`. */
function drawnMs(firstMs: number, atMs: number, nights: readonly TimeSpan[]): number {
  return nights.reduce((sum, night) => {
    const lengthMs = night.toMs - night.fromMs
    const hiddenMs = Math.max(0, lengthMs - NIGHT_SHOWN_MAX_MS)
    const passedMs = Math.min(Math.max(0, atMs - Math.max(night.fromMs, firstMs)), lengthMs)
    return sum - passedMs * (hiddenMs / lengthMs)
  }, atMs - firstMs)
}

/** Labels nearer than this share of the width would run into one another; a day's name needs more room than an hour. */
const DAY_GAP_SHARE = 0.075
const HOUR_GAP_SHARE = 0.055

/** Labels that fit: now, each working day's first hour with its day, then 9, 13 and 18 o'clock. */
export function labelAxis(axis: DayAxis, nowMs: number, timeZone: string): AxisLabel[] {
  const labels: AxisLabel[] = [{ atMs: nowMs, position: axis.position(nowMs), text: 'Now', isHour: false }]
  for (const { atMs, isHour } of [...listDayStarts(axis, timeZone), ...listHours(axis, timeZone)]) {
    const position = axis.position(atMs)
    const gapShare = isHour ? HOUR_GAP_SHARE : DAY_GAP_SHARE
    const hasRoom = labels.every(label => Math.abs(label.position - position) >= gapShare)
    if (hasRoom && position <= 1 - EDGE_SHARE) labels.push({ atMs, position, text: nameHour(atMs, timeZone, !isHour), isHour })
  }
  return labels.sort((a, b) => a.position - b.position)
}

/** The end of each night, and the first whole hour on the axis. */
function listDayStarts(axis: DayAxis, timeZone: string): { atMs: number, isHour: boolean }[] {
  const ends = axis.nights.map(night => night.toMs).filter(atMs => atMs < axis.toMs)
  const first = listWholeHours(axis, timeZone).slice(0, 1).map(hour => hour.atMs)
  return [...ends, ...first].map(atMs => ({ atMs, isHour: false }))
}

function listHours(axis: DayAxis, timeZone: string): { atMs: number, isHour: boolean }[] {
  const isNight = (atMs: number) => axis.nights.some(night => atMs > night.fromMs && atMs < night.toMs)
  return listWholeHours(axis, timeZone)
    .filter(({ atMs, hour }) => LABELLED_HOURS.includes(hour) && !isNight(atMs))
    .map(({ atMs }) => ({ atMs, isHour: true }))
}

function listWholeHours(axis: DayAxis, timeZone: string): { atMs: number, hour: number }[] {
  const read = (atMs: number) => formatHour(atMs, timeZone).split(':').map(Number)
  const firstMinute = Math.ceil(axis.fromMs / 60_000) * 60_000
  // Zones may lie half an hour apart from UTC, so the first whole hour is looked for on their own clock.
  const [, minute = 0] = read(firstMinute)
  const hours: { atMs: number, hour: number }[] = []
  for (let atMs = firstMinute + ((60 - minute) % 60) * 60_000; atMs <= axis.toMs; atMs += HOUR_MS) {
    const [hour = 0] = read(atMs)
    hours.push({ atMs, hour })
  }
  return hours
}

/** `9`, `9:30`, or with its day `Tue 9`. */
function nameHour(atMs: number, timeZone: string, isWithDay: boolean): string {
  const [hour = '', minute = '00'] = formatHour(atMs, timeZone).split(':')
  const short = minute === '00' ? String(Number(hour)) : `${Number(hour)}:${minute}`
  return isWithDay ? `${formatDay(atMs, timeZone).slice(0, 3)} ${short}` : short
}
