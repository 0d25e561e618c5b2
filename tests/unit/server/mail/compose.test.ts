import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { queueLetter } from '#server/features/mail/outbox.service'
import { recipientsOf } from '#server/features/mail/recipients'
import { composeLetter } from '#server/features/mail/compose'
import type { House } from '../people/open-house'
import { NOW_MS, openHouse } from '../people/open-house'

let house: House
let joelId: string
let ruthId: string
let maraId: string
let tomasId: string

/** Thu 21 May 2026, 16:00 UTC: 17:00 in London. */
const PROMISED_AT_MS = Date.UTC(2026, 4, 21, 16, 0)

beforeEach(async () => {
  house = await openHouse()
  joelId = await house.addPerson({ email: 'joel@northfield.test', name: 'Joel Okafor' })
  ruthId = await house.addPerson({ email: 'ruth@northfield.test', role: 'guardian', name: 'Ruth Okafor' })
  maraId = await house.addPerson({ email: 'mara@northfield.test', role: 'coach', name: 'Mara Lindqvist' })
  tomasId = await house.addPerson({ email: 'tomas@northfield.test', role: 'coach', name: 'Tomas Abara' })
  await house.db.updateTable('users').set({ time_zone: 'Asia/Tokyo' }).where('id', '=', tomasId).execute()
  await house.db.insertInto('guardianships').values({ guardian_id: ruthId, junior_id: joelId, created_at_ms: 0 }).execute()
  await house.db.insertInto('reviews').values({
    id: 'review', student_id: joelId, number: 1, state: 'waiting', title: 'Heavy 7-irons', question: 'Why?', area: 'full_swing', club: '7-iron',
    created_at_ms: NOW_MS, submitted_at_ms: NOW_MS,
  }).execute()
  await house.db.insertInto('calendars').values({ id: 'hours', coach_id: null, version: 1, time_zone: 'Europe/London', weekly: '{}', time_off: '[]', created_at_ms: 0 }).execute()
  await house.db.insertInto('turnarounds').values({
    id: 'clock', review_id: 'review', kind: 'answer', sequence: 1, status: 'running', calendar_id: 'hours', turnaround_ms: 1,
    started_at_ms: NOW_MS, promised_at_ms: PROMISED_AT_MS,
  }).execute()
})
afterEach(() => house.close())

async function queue(letter: 'review-waiting' | 'answered', subjectId: string, userIds: readonly string[]): Promise<void> {
  const ctx = await house.ctx()
  for (const userId of userIds) await queueLetter(house.db, ctx, { letter, event: subjectId, subjectId, to: { userId } })
}

const change = (columns: { state: 'in_hand' | 'withdrawn', coach_id?: string }) =>
  house.db.updateTable('reviews').set(columns).where('id', '=', 'review').execute()

describe('a review waits', () => {
  it('tells each coach the promise in their own zone, and leads to the desk', async () => {
    await queue('review-waiting', 'review', [maraId, tomasId])
    const letters = await house.letters()
    expect(letters.map(({ to, subject }) => [to, subject]).sort()).toEqual([
      ['mara@northfield.test', 'A review waits, promised by Thu 21 May, 17:00'],
      ['tomas@northfield.test', 'A review waits, promised by Fri 22 May, 01:00'],
    ])
    expect(letters[0]?.text).toContain('https://lessons.northfield.test/desk/review')
    expect(letters[0]?.text).toContain('Joel Okafor has sent film. The first free coach answers it')
  })

  it('says who was chosen', async () => {
    await house.db.updateTable('reviews').set({ chosen_coach_id: maraId }).execute()
    await queue('review-waiting', 'review', [maraId])
    expect((await house.letters())[0]?.text).toMatch(/^Mara.*, Joel Okafor has sent film and chose you to answer\./m)
  })

  it('is not told once another coach has it in hand, or it is withdrawn', async () => {
    await queue('review-waiting', 'review', [maraId, tomasId])
    await change({ state: 'in_hand', coach_id: maraId })
    expect((await house.letters()).map(({ to }) => to)).toEqual(['mara@northfield.test'])
    await change({ state: 'withdrawn' })
    expect(await house.letters()).toEqual([])
  })
})

describe('an answer', () => {
  beforeEach(async () => {
    await house.db.insertInto('diagnoses').values({
      id: 'diagnosis', review_id: 'review', sequence: 1, coach_id: maraId, title: 'Why they come in twos', leave_alone: 'Your **set-up** is in good order.',
      saw: 'The grip end hangs behind.', why: 'The hands slow down.', how_sure: 'fairly_sure', one_change: 'Keep the grip end travelling.',
      caution: 'Stop if your back hurts.', answered_at_ms: NOW_MS,
    }).execute()
    await house.db.insertInto('prescriptions').values({
      id: 'prescription', diagnosis_id: 'diagnosis', drill_title: 'Low punch', drill_steps: '1. Handle ahead.', drill_dose: 'Daily',
    }).execute()
    await queue('answered', 'diagnosis', (await recipientsOf(house.db, joelId)).map(({ userId }) => userId))
  })

  it('goes to the student and, saying whose review it is, to the guardian', async () => {
    const letters = await house.letters()
    const to = (address: string) => letters.find(letter => letter.to === address)?.text ?? ''
    expect(letters).toHaveLength(2)
    expect(to('joel@northfield.test')).toContain('Joel, the answer to your review is there.')
    expect(to('ruth@northfield.test')).toContain('Ruth, Mara Lindqvist has answered the review of Joel Okafor.')
    for (const text of [to('joel@northfield.test'), to('ruth@northfield.test')]) {
      expect(text).toContain('Your set-up is in good order. The grip end hangs behind.')
      expect(text).toContain('One change: Keep the grip end travelling.')
      expect(text).toContain('https://lessons.northfield.test/reviews/review')
    }
  })

  it('does not go to a guardian whose guardianship ended while the letter waited', async () => {
    await house.db.updateTable('guardianships').set({ ended_at_ms: NOW_MS }).execute()
    expect((await house.letters()).map(({ to }) => to)).toEqual(['joel@northfield.test'])
  })

  it('is not told when it is gone', async () => {
    await house.db.deleteFrom('diagnoses').execute()
    expect(await house.letters()).toEqual([])
  })
})

describe('letters of another version', () => {
  it('are not sent, rather than holding up the others', async () => {
    await queue('answered', 'nothing', [joelId])
    await house.db.updateTable('outbox').set({ letter: 'letter-of-the-future' }).execute()
    const row = await house.db.selectFrom('outbox').selectAll().executeTakeFirstOrThrow()
    expect(await composeLetter(await house.ctx(), row)).toBeUndefined()
  })
})
