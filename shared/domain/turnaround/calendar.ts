import { MINUTES_A_DAY, isTimeZone } from './zone'

/** Local wall minutes of one weekday, half-open. */
export interface WeeklyHours {
  /** ISO: Monday is 1, Sunday 7. */
  weekday: number
  /** 0 to 1439. */
  fromMinute: number
  /** 1 to 1440; 1440 is the end of the day. Hours over midnight are two entries. */
  toMinute: number
}

/** Half-open span of instants, UTC epoch milliseconds. */
export interface Span {
  fromMs: number
  toMs: number
}

/** When a coach (or the studio) works: weekly hours on the wall clock of one zone, less time off. */
export interface WorkingCalendar {
  /** IANA name. */
  timeZone: string
  weekly: readonly WeeklyHours[]
  /** May overlap one another: the studio's holiday within the coach's own. */
  timeOff: readonly Span[]
}

export type CalendarProblemCode
  = 'unknown-time-zone' | 'empty' | 'bad-weekday' | 'bad-minute' | 'from-not-before-to' | 'overlap' | 'bad-instant'

export interface CalendarProblem {
  code: CalendarProblemCode
  field: 'timeZone' | 'weekly' | 'timeOff'
  /** Position in `weekly` or `timeOff`; null when the whole field is meant. For `overlap`, the later of the two. */
  index: number | null
  message: string
}

/**
 * What is wrong with a calendar, in the order zone, hours, time off; an empty list when it can be used.
 * Never throws, so that a form can show every problem at once. Hours that touch (…12:00, 12:00…) are fine.
 */
export function calendarProblems(calendar: WorkingCalendar): CalendarProblem[] {
  const problems: CalendarProblem[] = []
  if (!isTimeZone(calendar.timeZone)) {
    problems.push({ code: 'unknown-time-zone', field: 'timeZone', index: null, message: 'Choose a time zone from the list.' })
  }
  if (calendar.weekly.length === 0) {
    problems.push({ code: 'empty', field: 'weekly', index: null, message: 'Give at least one span of working hours.' })
  }
  calendar.weekly.forEach((hours, index) => {
    const problem = hoursProblem(hours)
    if (problem) problems.push({ ...problem, field: 'weekly', index })
  })
  problems.push(...overlapProblems(calendar.weekly))
  calendar.timeOff.forEach((span, index) => {
    const problem = timeOffProblem(span)
    if (problem) problems.push({ ...problem, field: 'timeOff', index })
  })
  return problems
}

type Finding = Pick<CalendarProblem, 'code' | 'message'> | null

function hoursProblem({ weekday, fromMinute, toMinute }: WeeklyHours): Finding {
  if (!isWholeBetween(weekday, 1, 7)) return { code: 'bad-weekday', message: 'Choose a day of the week.' }
  if (!isWholeBetween(fromMinute, 0, MINUTES_A_DAY - 1) || !isWholeBetween(toMinute, 0, MINUTES_A_DAY)) {
    return { code: 'bad-minute', message: 'Give times between 00:00 and 24:00, in whole minutes.' }
  }
  if (fromMinute >= toMinute) return { code: 'from-not-before-to', message: 'These hours end before they begin.' }
  return null
}

function timeOffProblem({ fromMs, toMs }: Span): Finding {
  if (!Number.isSafeInteger(fromMs) || !Number.isSafeInteger(toMs)) return { code: 'bad-instant', message: 'Give the beginning and the end of the time off.' }
  if (fromMs >= toMs) return { code: 'from-not-before-to', message: 'This time off ends before it begins.' }
  return null
}

/** Only sound entries are compared: an entry that already has a problem would be reported twice for one slip. */
function overlapProblems(weekly: readonly WeeklyHours[]): CalendarProblem[] {
  const problems: CalendarProblem[] = []
  weekly.forEach((hours, index) => {
    const isOverlapping = !hoursProblem(hours) && weekly.slice(0, index).some(other => !hoursProblem(other) && overlap(hours, other))
    if (isOverlapping) problems.push({ code: 'overlap', field: 'weekly', index, message: 'These hours overlap with others on the same day.' })
  })
  return problems
}

function overlap(one: WeeklyHours, other: WeeklyHours): boolean {
  return one.weekday === other.weekday && one.fromMinute < other.toMinute && other.fromMinute < one.toMinute
}

function isWholeBetween(value: number, min: number, max: number): boolean {
  return Number.isInteger(value) && value >= min && value <= max
}
