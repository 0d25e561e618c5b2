import { describe, expect, it } from 'vitest'
import type { QueueSpan } from '#shared/types/reviews'
import { findNights, joinSpans, labelAxis, layDayAxis } from '~/utils/day-line'

// Tue 12 May 2026, 00:00 UTC; London is an hour ahead then.
const MIDNIGHT_MS = Date.UTC(2026, 4, 12)
const at = (hours: number) => MIDNIGHT_MS + hours * 3_600_000

function span(kind: QueueSpan['kind'], from: number, to: number): QueueSpan {
  return { kind, fromMs: at(from), toMs: at(to) }
}

/** Mon 9:00 to Tue 14:00, working 9 to 18, now Tue 10:30; London time is UTC + 1. */
const row = [span('worked', -16, -7), span('off', -7, 8), span('worked', 8, 9.5), span('left', 9.5, 13)]

describe('joinSpans', () => {
  it('joins what overlaps or touches and orders the rest', () => {
    expect(joinSpans([{ fromMs: 5, toMs: 7 }, { fromMs: 0, toMs: 2 }, { fromMs: 2, toMs: 3 }, { fromMs: 1, toMs: 2 }]))
      .toEqual([{ fromMs: 0, toMs: 3 }, { fromMs: 5, toMs: 7 }])
  })
})

describe('findNights', () => {
  it('is the time off between two working days', () => {
    expect(findNights(row)).toEqual([{ fromMs: at(-7), toMs: at(8) }])
  })

  it('leaves out hours that another coach works', () => {
    expect(findNights([...row, span('worked', -7, -4)])).toEqual([{ fromMs: at(-4), toMs: at(8) }])
  })

  it('leaves out a break at noon', () => {
    expect(findNights([span('worked', 8, 12), span('off', 12, 13), span('worked', 13, 17)])).toEqual([])
  })
})

describe('layDayAxis', () => {
  const axis = layDayAxis([row], at(9.5))

  it('runs from the first start to the last promise within its edges', () => {
    expect(axis.position(at(-16))).toBeCloseTo(0.02)
    expect(axis.position(at(13))).toBeCloseTo(0.98)
    expect(axis.position(at(-99))).toBeCloseTo(0.02)
    expect(axis.position(at(99))).toBeCloseTo(0.98)
  })

  it('draws the fifteen hours of the night as four', () => {
    const share = (from: number, to: number) => axis.position(at(to)) - axis.position(at(from))
    expect(share(-7, 8) / share(-16, -7)).toBeCloseTo(4 / 9)
    expect(share(8, 13) / share(-16, -7)).toBeCloseTo(5 / 9)
  })

  it('only ever goes forward', () => {
    let before = -1
    for (let hour = -16; hour <= 13; hour += 0.25) {
      const here = axis.position(at(hour))
      expect(here).toBeGreaterThan(before)
      before = here
    }
  })

  it('has room around now with nothing to show', () => {
    const empty = layDayAxis([], at(10))
    expect(empty.position(at(10))).toBeCloseTo(0.5)
  })
})

describe('labelAxis', () => {
  it('names now, the days at their first hour, and hours between, in the reader’s zone', () => {
    const labels = labelAxis(layDayAxis([row], at(9.5)), at(9.5), 'Europe/London')
    expect(labels.map(label => label.text)).toEqual(['Mon 9', '13', '18', 'Tue 9', 'Now', '13'])
    expect(labels.map(label => label.atMs)).toEqual([...labels.map(label => label.atMs)].sort((a, b) => a - b))
  })

  it('finds whole hours where zones lie half an hour apart', () => {
    const labels = labelAxis(layDayAxis([row], at(9.5)), at(9.5), 'Asia/Kolkata')
    const hours = labels.filter(label => label.text === '13' || label.text === '18')
    expect(hours.length).toBeGreaterThan(0)
    for (const label of hours) expect(label.atMs % 3_600_000).toBe(1_800_000)
  })

  it('never sets two labels on one another', () => {
    const positions = labelAxis(layDayAxis([row], at(9.5)), at(9.5), 'Europe/London').map(label => label.position)
    positions.slice(1).forEach((position, index) => expect(position - (positions[index] ?? 0)).toBeGreaterThanOrEqual(0.055))
  })
})
