import { describe, expect, it } from 'vitest'
import type { QueueAnswer, QueueRow, ReviewRow } from '#shared/types/reviews'
import { queueHeading, reviewListHeading, shortMoment, timeInHand } from '~/utils/review-words'

const HOUR_MS = 3_600_000
// Tue 12 May 2026, 09:00 UTC: 10:00 in London.
const NOW_MS = Date.UTC(2026, 4, 12, 9)
const ZONE = 'Europe/London'

function row(state: ReviewRow['state'], promisedAtMs: number | null): ReviewRow {
  return { id: 'a', number: 1, state, title: 'T', studentName: 'Joel', coachName: null, club: '7-iron', promisedAtMs, answeredAtMs: null, createdAtMs: 0 }
}

describe('reviewListHeading', () => {
  it('says when the next answer comes, whatever the order of the list', () => {
    const rows = [row('waiting', NOW_MS + 30 * HOUR_MS), row('in_hand', NOW_MS + 4 * HOUR_MS), row('answered', NOW_MS - HOUR_MS)]
    expect(reviewListHeading(rows, 'student', NOW_MS, ZONE)).toBe('Your next answer comes by Tue 12 May, 14:00')
    expect(reviewListHeading(rows, 'coach', NOW_MS, ZONE)).toBe('The next answer comes by Tue 12 May, 14:00')
  })

  it('says plainly that one is late', () => {
    expect(reviewListHeading([row('waiting', NOW_MS - HOUR_MS)], 'student', NOW_MS, ZONE))
      .toBe('Your next answer is late; it was promised by Tue 12 May, 09:00')
  })

  it('says that nothing waits', () => {
    expect(reviewListHeading([], 'student', NOW_MS, ZONE)).toBe('Nothing waits for an answer')
    expect(reviewListHeading([row('draft', null), row('answered', NOW_MS)], 'student', NOW_MS, ZONE)).toBe('Nothing waits for an answer')
    expect(reviewListHeading([row('new_film', NOW_MS)], 'student', NOW_MS, ZONE)).toBe('New film is awaited')
  })
})

describe('shortMoment', () => {
  it('leaves the day out when it is the same in the reader’s zone', () => {
    expect(shortMoment(NOW_MS + 4 * HOUR_MS, NOW_MS, ZONE)).toBe('14:00')
    expect(shortMoment(NOW_MS + 4 * HOUR_MS, NOW_MS, 'Pacific/Auckland')).toBe('Wed 13 May, 01:00')
  })
})

describe('timeInHand', () => {
  const hand = (timeInHandMs: number, promisedAtMs: number): Pick<QueueRow, 'timeInHandMs' | 'promisedAtMs' | 'state'> => ({ timeInHandMs, promisedAtMs, state: 'waiting' })

  it('is working time, soon under two hours', () => {
    expect(timeInHand(hand(3 * HOUR_MS + 20 * 60_000, NOW_MS + 4 * HOUR_MS), NOW_MS)).toEqual({ text: '3 h 20', urgency: 'calm' })
    expect(timeInHand(hand(1.75 * HOUR_MS, NOW_MS + 2 * HOUR_MS), NOW_MS)).toEqual({ text: '1 h 45', urgency: 'soon' })
  })

  it('says how late, and late even when no working time has passed since', () => {
    expect(timeInHand(hand(-40 * 60_000, NOW_MS - HOUR_MS), NOW_MS)).toEqual({ text: '40 min late', urgency: 'late' })
    expect(timeInHand(hand(0, NOW_MS - HOUR_MS), NOW_MS)).toEqual({ text: 'late', urgency: 'late' })
  })
})

describe('timeInHand while new film is awaited', () => {
  it('is what was left when the clock stopped, never late', () => {
    expect(timeInHand({ timeInHandMs: 6 * HOUR_MS, promisedAtMs: NOW_MS - HOUR_MS, state: 'new_film' }, NOW_MS)).toEqual({ text: '6 h', urgency: 'calm' })
  })
})

describe('queueHeading', () => {
  const queueRow: QueueRow = {
    reviewId: 'r', turnaroundId: 't', kind: 'answer', state: 'waiting', studentName: 'Joel', isJunior: false, title: 'T', club: '7-iron',
    coachId: null, coachName: null, isMine: false, views: [], startedAtMs: 0, promisedAtMs: 0, timeInHandMs: 0, spans: [],
  }
  const queue = (change: Partial<QueueAnswer>): QueueAnswer => ({
    items: [queueRow], nextCursor: null, nowMs: NOW_MS, dueTodayCount: 4, closesAtMs: NOW_MS + HOUR_MS, workingMsLeftToday: HOUR_MS, waitingCount: 6, ...change,
  })

  it.each([
    [queue({}), 'Four due before you close today'],
    [queue({ dueTodayCount: 13 }), '13 due before you close today'],
    [queue({ dueTodayCount: 0 }), 'Nothing due before you close today'],
    [queue({ dueTodayCount: 0, closesAtMs: null }), 'Nothing due today'],
    [queue({ dueTodayCount: 2, closesAtMs: null }), 'Two due today, your day off'],
    [queue({ items: [] }), 'Nothing waits for you'],
  ])('answers its question', (answer, heading) => {
    expect(queueHeading(answer)).toBe(heading)
  })
})
