import type { WorkingCalendar } from './calendar'
import type { TurnaroundPause } from './events'
import { clippedSpans, mergedSpans, workingSpans } from './spans'

/** `worked` and `off` (nights, time off) before now, `paused` while the clock stood still, `left` and `left-off` after now. */
export type DayLineKind = 'worked' | 'off' | 'paused' | 'left' | 'left-off'

export interface DayLineSpan {
  fromMs: number
  toMs: number
  kind: DayLineKind
}

export interface DayLineRequest {
  calendar: WorkingCalendar
  startMs: number
  promisedAtMs: number
  nowMs: number
  /** A pause without an end lasts until now. */
  pauses?: readonly TurnaroundPause[]
  /** Nothing is left after the stop. */
  stoppedAtMs?: number | null
}

/**
 * The bar of one turnaround on the day line: spans from start to promise without gaps, in order, cut at now, no two
 * neighbours of one kind. A promise in the past ends the bar; a stop ends it too when it came before the promise. Hours
 * during a pause are `paused`, whether working or not. A promise at or before the start gives `[]`. Throws as `workingSpans` does.
 */
export function dayLineSpans({ calendar, startMs, promisedAtMs, nowMs, pauses = [], stoppedAtMs = null }: DayLineRequest): DayLineSpan[] {
  const cutMs = Math.min(Math.max(Math.min(nowMs, stoppedAtMs ?? nowMs), startMs), promisedAtMs)
  const line: DayLineSpan[] = []
  let atMs = startMs
  const stood = pauses.map(pause => ({ fromMs: pause.fromMs, toMs: pause.toMs ?? cutMs }))
  for (const pause of mergedSpans(clippedSpans(stood, startMs, cutMs))) {
    line.push(...labelled(calendar, atMs, pause.fromMs, 'worked', 'off'), { ...pause, kind: 'paused' })
    atMs = pause.toMs
  }
  line.push(...labelled(calendar, atMs, cutMs, 'worked', 'off'))
  if (stoppedAtMs === null) line.push(...labelled(calendar, cutMs, promisedAtMs, 'left', 'left-off'))
  return line
}

function labelled(calendar: WorkingCalendar, fromMs: number, toMs: number, working: DayLineKind, off: DayLineKind): DayLineSpan[] {
  if (fromMs >= toMs) return []
  const line: DayLineSpan[] = []
  let atMs = fromMs
  for (const span of workingSpans(calendar, fromMs, toMs)) {
    if (atMs < span.fromMs) line.push({ fromMs: atMs, toMs: span.fromMs, kind: off })
    line.push({ ...span, kind: working })
    atMs = span.toMs
  }
  if (atMs < toMs) line.push({ fromMs: atMs, toMs, kind: off })
  return line
}
