import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { workingMsBetween } from '#shared/domain/turnaround/between'
import type { DayLineKind, DayLineRequest } from '#shared/domain/turnaround/day-line'
import { dayLineSpans } from '#shared/domain/turnaround/day-line'
import { at, span, weekdays } from './sample-calendars'

const calendar = weekdays('UTC', 9, 17)
const request: DayLineRequest = {
  calendar, startMs: at('2026-05-12T15:00Z'), promisedAtMs: at('2026-05-14T11:00Z'), nowMs: at('2026-05-13T12:00Z'),
}
const piece = (from: string, to: string, kind: DayLineKind) => ({ ...span(from, to), kind })

describe('dayLineSpans', () => {
  it('tells worked, off, left and left-off, cut at now', () => {
    expect(dayLineSpans(request)).toEqual([
      piece('2026-05-12T15:00Z', '2026-05-12T17:00Z', 'worked'),
      piece('2026-05-12T17:00Z', '2026-05-13T09:00Z', 'off'),
      piece('2026-05-13T09:00Z', '2026-05-13T12:00Z', 'worked'),
      piece('2026-05-13T12:00Z', '2026-05-13T17:00Z', 'left'),
      piece('2026-05-13T17:00Z', '2026-05-14T09:00Z', 'left-off'),
      piece('2026-05-14T09:00Z', '2026-05-14T11:00Z', 'left'),
    ])
  })
  it('shows a pause through the night as one', () => {
    expect(dayLineSpans({ ...request, pauses: [{ fromMs: at('2026-05-12T16:00Z'), toMs: at('2026-05-13T10:00Z') }] }).slice(0, 3)).toEqual([
      piece('2026-05-12T15:00Z', '2026-05-12T16:00Z', 'worked'),
      piece('2026-05-12T16:00Z', '2026-05-13T10:00Z', 'paused'),
      piece('2026-05-13T10:00Z', '2026-05-13T12:00Z', 'worked'),
    ])
  })
  it('lets a pause that lasts reach to now, and joins one that was split', () => {
    const pauses = [{ fromMs: at('2026-05-12T16:00Z'), toMs: at('2026-05-13T10:00Z') }, { fromMs: at('2026-05-13T10:00Z'), toMs: null }]
    expect(dayLineSpans({ ...request, pauses }).filter(one => one.kind === 'paused')).toEqual([piece('2026-05-12T16:00Z', '2026-05-13T12:00Z', 'paused')])
  })
  it('ends at the promise when late', () => {
    const line = dayLineSpans({ ...request, nowMs: at('2026-05-20T12:00Z') })
    expect(line.at(-1)).toEqual(piece('2026-05-14T09:00Z', '2026-05-14T11:00Z', 'worked'))
  })
  it('ends at the stop', () => {
    const line = dayLineSpans({ ...request, nowMs: at('2026-05-20T12:00Z'), stoppedAtMs: at('2026-05-13T10:00Z') })
    expect(line.at(-1)).toEqual(piece('2026-05-13T09:00Z', '2026-05-13T10:00Z', 'worked'))
  })
  it('has everything left before the start, and nothing without a span', () => {
    expect(dayLineSpans({ ...request, nowMs: 0 }).every(one => one.kind.startsWith('left'))).toBe(true)
    expect(dayLineSpans({ ...request, promisedAtMs: request.startMs })).toEqual([])
    expect(dayLineSpans({ ...request, promisedAtMs: request.startMs - 1 })).toEqual([])
  })
  it('is off throughout without hours', () => {
    expect(dayLineSpans({ ...request, calendar: { ...calendar, weekly: [] } }).map(one => one.kind)).toEqual(['off', 'left-off'])
  })
  it('covers start to promise without gaps, and its parts measure right', () => {
    const hour = fc.integer({ min: 0, max: 300 })
    fc.assert(fc.property(hour, hour, fc.array(fc.tuple(hour, hour), { maxLength: 4 }), (nowHours, dueHours, stood) => {
      const startMs = at('2026-05-08T06:30Z')
      const after = (hours: number): number => startMs + hours * 3_600_000
      const pauses = stood.map(([one, other]) => ({ fromMs: after(Math.min(one, other)), toMs: after(Math.max(one, other)) }))
      const promisedAtMs = after(dueHours + 1)
      const nowMs = after(nowHours)
      const line = dayLineSpans({ calendar, startMs, promisedAtMs, nowMs, pauses })
      expect(line[0]?.fromMs).toBe(startMs)
      expect(line.at(-1)?.toMs).toBe(promisedAtMs)
      line.slice(1).forEach((one, index) => {
        expect(one.fromMs).toBe(line[index]?.toMs)
        expect(one.kind).not.toBe(line[index]?.kind)
      })
      const lengthOf = (kind: DayLineKind): number => line.filter(one => one.kind === kind).reduce((sum, one) => sum + one.toMs - one.fromMs, 0)
      expect(lengthOf('left')).toBe(Math.max(0, workingMsBetween(calendar, nowMs, promisedAtMs)))
      const inPauses = { ...calendar, timeOff: pauses }
      expect(lengthOf('worked')).toBe(workingMsBetween(inPauses, startMs, Math.min(nowMs, promisedAtMs)))
    }), { seed: 9, numRuns: 60 })
  })
})
