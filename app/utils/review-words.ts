import type { QueueAnswer, QueueRow, ReviewRow, ReviewView } from '#shared/types/reviews'
import type { Role } from '#shared/types/people'
import { stateWords } from '#shared/domain/review/state-words'
import { formatDay, formatHour, formatMoment, formatWorkingTime } from '#shared/utils/times'

const NUMBER_WORDS = ['No', 'One', 'Two', 'Three', 'Four', 'Five', 'Six', 'Seven', 'Eight', 'Nine', 'Ten', 'Eleven', 'Twelve']

/** `Four` up to twelve, then figures; for the beginning of a sentence. */
export function countWords(count: number): string {
  return NUMBER_WORDS[count] ?? String(count)
}

/** The heading of the reader's list: when the next answer comes, or that none is waited for. */
export function reviewListHeading(rows: readonly ReviewRow[], reader: Role, nowMs: number, timeZone: string): string {
  const due = rows
    .filter(row => row.state === 'waiting' || row.state === 'in_hand')
    .flatMap(row => row.promisedAtMs ?? [])
    .sort((a, b) => a - b)
  const next = due[0]
  if (next === undefined) return rows.some(row => row.state === 'new_film') ? 'New film is awaited' : 'Nothing waits for an answer'
  const whose = reader === 'student' ? 'Your next answer' : 'The next answer'
  if (next < nowMs) return `${whose} is late; it was promised by ${formatMoment(next, timeZone)}`
  return `${whose} comes by ${formatMoment(next, timeZone)}`
}

/** The heading of one review that is not answered yet. */
export function reviewHeading(review: ReviewView, reader: Role, nowMs: number, timeZone: string): string {
  const { turnaround, state } = review
  if (turnaround === null || turnaround.status === 'stopped' || (state !== 'waiting' && state !== 'in_hand')) {
    return stateWords(state, reader)
  }
  const promised = formatMoment(turnaround.promisedAtMs, timeZone)
  if (turnaround.isLate || turnaround.promisedAtMs < nowMs) return `${reader === 'student' ? 'Your' : 'The'} answer is late; it was promised by ${promised}`
  return reader === 'student' ? `Your answer comes by ${promised}` : `The answer is promised by ${promised}`
}

/** `14:00`, with the day when it is another one than `besideMs` stands on. */
export function shortMoment(atMs: number, besideMs: number, timeZone: string): string {
  const isSameDay = formatDay(atMs, timeZone) === formatDay(besideMs, timeZone)
  return isSameDay ? formatHour(atMs, timeZone) : formatMoment(atMs, timeZone)
}

/** The heading of the queue. */
export function queueHeading(queue: QueueAnswer): string {
  if (queue.items.length === 0) return 'Nothing waits for you'
  const { dueTodayCount, closesAtMs, nowMs } = queue
  if (closesAtMs === null) return dueTodayCount === 0 ? 'Nothing due today' : `${countWords(dueTodayCount)} due today, your day off`
  if (nowMs >= closesAtMs) return dueTodayCount === 0 ? 'You closed with nothing owed' : `${countWords(dueTodayCount)} still owed from today`
  return dueTodayCount === 0 ? 'Nothing due before you close today' : `${countWords(dueTodayCount)} due before you close today`
}

export interface TimeInHand {
  text: string
  urgency: 'late' | 'soon' | 'calm'
}

const SOON_MS = 2 * 3_600_000

/** What is left of a promise in working time: `1 h 45`, `40 min late`. Under two hours is soon. */
export function timeInHand(row: Pick<QueueRow, 'timeInHandMs' | 'promisedAtMs' | 'state'>, nowMs: number): TimeInHand {
  // While new film is awaited nothing is used up, however long it takes.
  if (row.state === 'new_film') return { text: formatWorkingTime(Math.max(0, row.timeInHandMs)), urgency: 'calm' }
  if (row.timeInHandMs < 0) return { text: `${formatWorkingTime(-row.timeInHandMs)} late`, urgency: 'late' }
  // Outside working hours a promise can pass with no working time lost yet.
  if (row.promisedAtMs < nowMs) return { text: 'late', urgency: 'late' }
  return { text: formatWorkingTime(row.timeInHandMs), urgency: row.timeInHandMs < SOON_MS ? 'soon' : 'calm' }
}
