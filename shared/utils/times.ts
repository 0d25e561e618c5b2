/**
 * Times as they are read on screens. Each takes the reader's zone: the server and the browser must write the same words,
 * so the zone of the machine never decides. The words are put together from parts, since the joints that `Intl` itself
 * puts between weekday, date and hour differ between versions of its data.
 */

const minuteMs = 60_000
const hourMs = 60 * minuteMs

interface MomentParts {
  weekday: string
  day: string
  month: string
  year: string
  hour: string
  minute: string
}

/** `Thu 21 May, 17:00`. */
export function formatMoment(atMs: number, timeZone: string): string {
  const { weekday, day, month, hour, minute } = partsOf(atMs, timeZone)
  return `${weekday} ${day} ${month}, ${hour}:${minute}`
}

/** `Thu 21 May, 17:00`, or `Thu 21 May 2025, 17:00` when that is not the year of `nowMs` in the same zone. */
export function formatMomentWithYear(atMs: number, timeZone: string, nowMs: number): string {
  const { weekday, day, month, year, hour, minute } = partsOf(atMs, timeZone)
  const yearWhenOther = year === partsOf(nowMs, timeZone).year ? '' : ` ${year}`
  return `${weekday} ${day} ${month}${yearWhenOther}, ${hour}:${minute}`
}

/** `Thu 21 May`. */
export function formatDay(atMs: number, timeZone: string): string {
  const { weekday, day, month } = partsOf(atMs, timeZone)
  return `${weekday} ${day} ${month}`
}

/** `21 May 2026`, for things that lie a while back. */
export function formatDate(atMs: number, timeZone: string): string {
  const { day, month, year } = partsOf(atMs, timeZone)
  return `${day} ${month} ${year}`
}

/** `17:00`. */
export function formatHour(atMs: number, timeZone: string): string {
  const { hour, minute } = partsOf(atMs, timeZone)
  return `${hour}:${minute}`
}

/**
 * A length of working time: `14 min`, `1 h 45`, `9 h`. Started minutes are not counted, so that what is left is never
 * overstated; under a minute is `0 min`. A negative length is written with a minus sign and the same rounding of its size.
 */
export function formatWorkingTime(lengthMs: number): string {
  const sign = lengthMs <= -minuteMs ? '−' : ''
  const sizeMs = Math.abs(lengthMs)
  const hours = Math.floor(sizeMs / hourMs)
  const minutes = Math.floor((sizeMs % hourMs) / minuteMs)
  if (hours === 0) return `${sign}${minutes} min`
  if (minutes === 0) return `${sign}${hours} h`
  return `${sign}${hours} h ${String(minutes).padStart(2, '0')}`
}

function partsOf(atMs: number, timeZone: string): MomentParts {
  const parts = new Map(formatterFor(timeZone).formatToParts(atMs).map(part => [part.type, part.value]))
  const read = (type: Intl.DateTimeFormatPartTypes) => parts.get(type) ?? ''
  return {
    weekday: read('weekday'),
    day: read('day'),
    month: read('month'),
    year: read('year'),
    hour: read('hour'),
    minute: read('minute'),
  }
}

/** `en-US` for its three-letter months: British data has written September with four letters since 2021. */
function formatterFor(timeZone: string): Intl.DateTimeFormat {
  return new Intl.DateTimeFormat('en-US', {
    timeZone,
    weekday: 'short',
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
  })
}
