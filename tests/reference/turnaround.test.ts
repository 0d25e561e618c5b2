import { describe, expect, it } from 'vitest'
import { addWorkingMs } from '#shared/domain/turnaround/adding'
import { workingMsBetween } from '#shared/domain/turnaround/between'
import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import { queueFinishes } from '#shared/domain/turnaround/likely'
import { wallInstantMs } from '#shared/domain/turnaround/zone'

const HOUR_MS = 3_600_000
const at = (text: string): number => Date.parse(text)

function always(timeZone: string): WorkingCalendar {
  return { timeZone, weekly: [1, 2, 3, 4, 5, 6, 7].map(weekday => ({ weekday, fromMinute: 0, toMinute: 1440 })), timeOff: [] }
}

/** The instant of a wall time such as `2007-11-04T01:30`. */
function wall(timeZone: string, text: string): number {
  const minutes = at(`${text}Z`) / 60_000
  const epochDay = Math.floor(minutes / 1440)
  return wallInstantMs(timeZone, epochDay, minutes - epochDay * 1440)
}

describe('wall times, RFC 5545 §3.3.5', () => {
  it.each([
    // July 14 1997 13:30 in New York.
    ['1997-07-14T13:30', '1997-07-14T17:30Z'],
    // Happens twice: the first, 01:30 EDT.
    ['2007-11-04T01:30', '2007-11-04T05:30Z'],
    // Is skipped: read with the offset before the gap, 03:30 EDT.
    ['2007-03-11T02:30', '2007-03-11T07:30Z'],
    // A weekly series at 18:00 on both sides of a change (tz).
    ['2026-03-03T18:00', '2026-03-03T23:00Z'],
    ['2026-03-17T18:00', '2026-03-17T22:00Z'],
  ])('America/New_York %s', (text, expected) => {
    expect(wall('America/New_York', text)).toBe(at(expected))
  })
})

describe('changes of the clock, tz database', () => {
  it.each([
    // Rule US 2007 max: second Sunday of March at 02:00, which becomes 03:00 at 07:00Z; first of November, back at 06:00Z.
    ['America/New_York', '2026-03-08', 23, '2026-03-08T07:00Z'],
    ['America/New_York', '2026-11-01', 25, '2026-11-01T08:00Z'],
    // Rule EU: last Sundays of March and October, both at 01:00Z.
    ['Europe/London', '2026-03-29', 23, '2026-03-29T02:00Z'],
    ['Europe/London', '2026-10-25', 25, '2026-10-25T03:00Z'],
  ])('%s on %s has %i hours', (timeZone, date, hours, threeOClock) => {
    const midnightMs = wall(timeZone, `${date}T00:00`)
    const nextMidnightMs = wall(timeZone, `${date}T24:00`)
    expect((nextMidnightMs - midnightMs) / HOUR_MS).toBe(hours)
    expect(workingMsBetween(always(timeZone), midnightMs, nextMidnightMs)).toBe(hours * HOUR_MS)
    expect(wall(timeZone, `${date}T03:00`)).toBe(at(threeOClock))
  })

  it.each([['Asia/Kolkata', 330], ['Asia/Kathmandu', 345], ['America/Phoenix', -420]])('%s keeps %i minutes all year', (timeZone, offsetMinutes) => {
    for (let day = 0; day < 365; day += 1) {
      const utcNoonMs = at('2026-01-01T12:00Z') + day * 24 * HOUR_MS
      expect(wallInstantMs(timeZone, Math.floor(utcNoonMs / (24 * HOUR_MS)), 720)).toBe(utcNoonMs - offsetMinutes * 60_000)
    }
  })
})

describe('elapsed hours over a change of the clock', () => {
  it.each([
    ['America/New_York', '2026-03-07T12:00', 48, '2026-03-09T13:00'],
    ['America/New_York', '2026-10-31T12:00', 48, '2026-11-02T11:00'],
    ['Europe/London', '2026-03-28T12:00', 24, '2026-03-29T13:00'],
  ])('%s %s and %i hours', (timeZone, from, hours, expected) => {
    expect(addWorkingMs(always(timeZone), wall(timeZone, from), hours * HOUR_MS)).toEqual({ ok: true, atMs: wall(timeZone, expected) })
  })
})

describe('earliest due date first', () => {
  interface Job { workMs: number, promisedAtMs: number }
  /** Hours from zero become hours of a coach who never sleeps. */
  const jobsOf = (hours: number[], dueHours: number[]): Job[] =>
    hours.map((workHours, index) => ({ workMs: workHours * HOUR_MS, promisedAtMs: (dueHours[index] ?? Number.NaN) * HOUR_MS }))
  const finishHours = (jobs: Job[]): number[] => queueFinishes(always('UTC'), 0, jobs).map(({ finishAtMs }) => (finishAtMs ?? Number.NaN) / HOUR_MS)
  const latenessHours = (jobs: Job[]): number[] =>
    queueFinishes(always('UTC'), 0, jobs).map(({ work, finishAtMs }) => ((finishAtMs ?? Number.NaN) - work.promisedAtMs) / HOUR_MS)

  /** The least greatest lateness over every order, by trying them all. */
  function leastMaxLateness(jobs: Job[], startMs = 0): number {
    if (jobs.length === 0) return Number.NEGATIVE_INFINITY
    return Math.min(...jobs.map((job, index) => {
      const endMs = startMs + job.workMs
      const rest = jobs.filter((_, other) => other !== index)
      return Math.max((endMs - job.promisedAtMs) / HOUR_MS, leastMaxLateness(rest, endMs))
    }))
  }

  // Kleinberg & Tardos, Algorithm Design, chapter 4.2.
  it('finishes at 3 5 6 10 13 15 with a greatest lateness of 1', () => {
    const jobs = jobsOf([3, 2, 1, 4, 3, 2], [6, 8, 9, 9, 14, 15])
    expect(finishHours(jobs)).toEqual([3, 5, 6, 10, 13, 15])
    expect(Math.max(...latenessHours(jobs))).toBe(1)
    expect(leastMaxLateness(jobs)).toBe(1)
  })

  // Same work with tighter promises; another order is worse (7, lecture note).
  it('is late by 4 at most where another order is late by 7', () => {
    const jobs = jobsOf([3, 2, 1, 4, 3, 2], [6, 8, 9, 9, 10, 11])
    expect(Math.max(...latenessHours(jobs))).toBe(4)
    expect(leastMaxLateness(jobs)).toBe(4)
  })

  // Heizer & Render, Operations Management, sequencing: A 6/8, B 2/6, C 8/18, D 3/15, E 9/23.
  it('has a total flow of 68, a total tardiness of 6 and a greatest lateness of 5', () => {
    const jobs = jobsOf([6, 2, 8, 3, 9], [8, 6, 18, 15, 23])
    expect(finishHours(jobs).reduce((sum, hours) => sum + hours, 0)).toBe(68)
    expect(latenessHours(jobs).reduce((sum, hours) => sum + Math.max(0, hours), 0)).toBe(6)
    expect(Math.max(...latenessHours(jobs))).toBe(5)
    expect(leastMaxLateness(jobs)).toBe(5)
  })
})
