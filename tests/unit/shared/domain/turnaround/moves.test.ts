import { describe, expect, it } from 'vitest'
import type { CalendarsById, TurnaroundState } from '#shared/domain/turnaround/events'
import type { MoveOutcome } from '#shared/domain/turnaround/moves'
import {
  changeCoach, missTurnaround, pauseTurnaround, resumeTurnaround, startTurnaround, stopTurnaround,
} from '#shared/domain/turnaround/moves'
import { timeInHandMs } from '#shared/domain/turnaround/between'
import { HOUR_MS, at, weekdays } from './sample-calendars'

const mara = weekdays('UTC', 9, 17)
const calendars: CalendarsById = new Map([
  ['mara-1', mara],
  ['ivo-1', weekdays('UTC', 12, 16)],
  ['never', { ...mara, weekly: [] }],
])

function stateOf(outcome: MoveOutcome): TurnaroundState {
  if (!outcome.ok) throw new Error(outcome.reason)
  return outcome.state
}

const startMs = at('2026-05-12T10:00Z') // Tuesday
const start = { atMs: startMs, calendarVersionId: 'mara-1', turnaroundMs: 9 * HOUR_MS }
const running = stateOf(startTurnaround(start, calendars)) // promised Wednesday 11:00
const paused = stateOf(pauseTurnaround(running, at('2026-05-12T15:00Z'), calendars))
const stopped = stateOf(stopTurnaround(running, at('2026-05-13T10:00Z'), calendars))

describe('startTurnaround', () => {
  it('computes the promise', () => {
    expect(startTurnaround(start, calendars)).toMatchObject({
      ok: true,
      event: { kind: 'started', atMs: startMs, calendarVersionId: 'mara-1', promisedAtMs: at('2026-05-13T11:00Z') },
      state: { status: 'running', allowedMs: 9 * HOUR_MS, usedMs: 0, pauses: [], missedAtMs: null },
    })
  })
  it('keeps a quote that holds', () => {
    const quote = { promisedAtMs: at('2026-05-13T10:50Z'), quotedAtMs: startMs - 10 * 60_000 }
    expect(startTurnaround({ ...start, quote }, calendars)).toMatchObject({ ok: true, event: { promisedAtMs: quote.promisedAtMs } })
  })
  it.each([
    [{ ...start, calendarVersionId: 'lost' }, 'unknown-calendar'],
    [{ ...start, calendarVersionId: 'never' }, 'no-working-time'],
    [{ ...start, turnaroundMs: -1 }, 'not-a-duration'],
    [{ ...start, quote: { promisedAtMs: startMs - 1, quotedAtMs: startMs } }, 'promise-before-start'],
  ])('names what is wrong %#', (request, reason) => {
    expect(startTurnaround(request, calendars)).toEqual({ ok: false, reason })
  })
})

describe('pauseTurnaround and resumeTurnaround', () => {
  it('leave the promise while it stands still, then move it by the working length', () => {
    expect(paused).toMatchObject({ status: 'paused', promisedAtMs: running.promisedAtMs, usedMs: 5 * HOUR_MS, ranUntilMs: at('2026-05-12T15:00Z') })
    // Tuesday 15:00 to Thursday 10:00 is 2 + 8 + 1 working hours.
    const resumed = resumeTurnaround(paused, at('2026-05-14T10:00Z'), calendars)
    expect(resumed).toMatchObject({
      ok: true,
      event: { kind: 'resumed', promisedAtMs: at('2026-05-14T14:00Z') },
      state: { status: 'running', usedMs: 5 * HOUR_MS, allowedMs: 9 * HOUR_MS, ranUntilMs: null },
    })
  })
  it('keep the time in hand', () => {
    const resumedAtMs = at('2026-05-18T09:30Z')
    const resumed = stateOf(resumeTurnaround(paused, resumedAtMs, calendars))
    expect(timeInHandMs(mara, resumedAtMs, resumed.promisedAtMs)).toBe(timeInHandMs(mara, at('2026-05-12T15:00Z'), running.promisedAtMs))
  })
  it('do not heal a promise that was broken before the pause', () => {
    const late = stateOf(pauseTurnaround(running, at('2026-05-13T11:30Z'), calendars))
    expect(resumeTurnaround(late, at('2026-05-14T11:30Z'), calendars)).toMatchObject({ ok: true, event: { promisedAtMs: running.promisedAtMs } })
    expect(missTurnaround(late, at('2026-05-13T12:00Z'), calendars)).toMatchObject({ ok: true })
  })
  it('can begin and end in one moment', () => {
    expect(resumeTurnaround(paused, at('2026-05-12T15:00Z'), calendars)).toMatchObject({ ok: true, event: { promisedAtMs: running.promisedAtMs } })
  })
})

describe('stopTurnaround', () => {
  it('stops a clock that runs and one that stands still', () => {
    expect(stopped).toMatchObject({ status: 'stopped', stoppedAtMs: at('2026-05-13T10:00Z'), usedMs: 8 * HOUR_MS })
    const withdrawn = stateOf(stopTurnaround(paused, at('2026-06-01T10:00Z'), calendars))
    expect(withdrawn).toMatchObject({ status: 'stopped', usedMs: 5 * HOUR_MS, ranUntilMs: at('2026-05-12T15:00Z') })
    expect(withdrawn.pauses).toEqual([{ fromMs: at('2026-05-12T15:00Z'), toMs: at('2026-06-01T10:00Z') }])
  })
})

describe('missTurnaround', () => {
  it('takes the millisecond after the promise, not the promise itself', () => {
    expect(missTurnaround(running, running.promisedAtMs, calendars)).toEqual({ ok: false, reason: 'not-late' })
    expect(missTurnaround(running, running.promisedAtMs + 1, calendars)).toMatchObject({ ok: true, state: { status: 'running', missedAtMs: running.promisedAtMs + 1 } })
  })
  it('happens once', () => {
    const missed = stateOf(missTurnaround(running, running.promisedAtMs + 1, calendars))
    expect(missTurnaround(missed, running.promisedAtMs + 2, calendars)).toEqual({ ok: false, reason: 'already-missed' })
  })
  it('can be told after a late answer, never after one in time', () => {
    const late = stateOf(stopTurnaround(running, running.promisedAtMs + 1, calendars))
    expect(missTurnaround(late, running.promisedAtMs + HOUR_MS, calendars)).toMatchObject({ ok: true, state: { status: 'stopped' } })
    expect(missTurnaround(stopped, running.promisedAtMs + HOUR_MS, calendars)).toEqual({ ok: false, reason: 'not-late' })
  })
  it('does not happen while the clock stands still', () => {
    expect(missTurnaround(paused, at('2026-06-01T10:00Z'), calendars)).toEqual({ ok: false, reason: 'not-late' })
  })
})

describe('changeCoach', () => {
  const changeMs = at('2026-05-12T16:00Z')
  const newPromise = { calendarVersionId: 'ivo-1', promisedAtMs: at('2026-05-14T13:00Z') }
  it('leaves promise and calendar as they were', () => {
    expect(changeCoach(running, changeMs, calendars)).toMatchObject({
      ok: true,
      event: { kind: 'coach-changed', calendarVersionId: 'mara-1', promisedAtMs: running.promisedAtMs },
      state: { calendarVersionId: 'mara-1', allowedMs: 9 * HOUR_MS, usedMs: 6 * HOUR_MS },
    })
  })
  it('takes a promise that the student agreed to', () => {
    // 6 hours used; on Ivo's hours 4 on Wednesday and 1 on Thursday are left.
    expect(changeCoach(running, changeMs, calendars, newPromise)).toMatchObject({ ok: true, state: { ...newPromise, usedMs: 6 * HOUR_MS, allowedMs: 11 * HOUR_MS } })
  })
  it('measures a pause on the new calendar from then on', () => {
    const changed = stateOf(changeCoach(paused, changeMs, calendars, newPromise))
    expect(changed.pauses).toEqual([{ fromMs: at('2026-05-12T15:00Z'), toMs: changeMs }, { fromMs: changeMs, toMs: null }])
    expect(resumeTurnaround(changed, at('2026-05-13T14:00Z'), calendars)).toMatchObject({ ok: true, event: { promisedAtMs: at('2026-05-14T15:00Z') } })
  })
  it('does not hide a broken promise', () => {
    const lateMs = running.promisedAtMs + HOUR_MS
    expect(changeCoach(running, lateMs, calendars, newPromise)).toEqual({ ok: false, reason: 'miss-not-recorded' })
    const missed = stateOf(missTurnaround(running, lateMs, calendars))
    expect(changeCoach(missed, lateMs, calendars, newPromise)).toMatchObject({ ok: true, state: { missedAtMs: lateMs } })
    expect(changeCoach(running, lateMs, calendars)).toMatchObject({ ok: true })
  })
  it('refuses a promise in the past and a calendar that is not there', () => {
    expect(changeCoach(running, changeMs, calendars, { calendarVersionId: 'ivo-1', promisedAtMs: changeMs - 1 })).toEqual({ ok: false, reason: 'promise-before-start' })
    expect(changeCoach(running, changeMs, calendars, { ...newPromise, calendarVersionId: 'lost' })).toEqual({ ok: false, reason: 'unknown-calendar' })
  })
})

describe('a wrong order', () => {
  const laterMs = at('2026-05-13T10:30Z')
  const moves = { pauseTurnaround, resumeTurnaround, stopTurnaround, missTurnaround, changeCoach }
  it.each([
    ['pauseTurnaround', paused, 'not-running'],
    ['resumeTurnaround', running, 'not-paused'],
    ['pauseTurnaround', stopped, 'already-stopped'],
    ['resumeTurnaround', stopped, 'already-stopped'],
    ['stopTurnaround', stopped, 'already-stopped'],
    ['changeCoach', stopped, 'already-stopped'],
  ] as const)('%s is refused %#', (move, state, reason) => {
    expect(moves[move](state, laterMs, calendars)).toEqual({ ok: false, reason })
  })
  it.each(['pauseTurnaround', 'stopTurnaround', 'missTurnaround', 'changeCoach'] as const)('%s cannot go back in time', (move) => {
    expect(moves[move](running, startMs - 1, calendars)).toEqual({ ok: false, reason: 'out-of-order' })
  })
  it('resumeTurnaround cannot go back in time', () => {
    expect(resumeTurnaround(paused, at('2026-05-12T14:59Z'), calendars)).toEqual({ ok: false, reason: 'out-of-order' })
  })
  it('needs the calendar that the promise was made on', () => {
    for (const move of [pauseTurnaround, stopTurnaround, missTurnaround]) {
      expect(move(running, laterMs, new Map())).toEqual({ ok: false, reason: 'unknown-calendar' })
    }
    expect(resumeTurnaround(paused, laterMs, new Map())).toEqual({ ok: false, reason: 'unknown-calendar' })
  })
})
