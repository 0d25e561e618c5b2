import { describe, expect, it } from 'vitest'
import type { MoveRefusal, ReviewFacts, ReviewMove, ReviewRole, ReviewState } from '#shared/domain/review/states'
import {
  AUTO_CLOSE_AFTER_QUIET_MS, FILM_ASKED_MAX_COUNT, NOT_ANSWERED_MAX_COUNT, REVIEW_MOVES, REVIEW_ROLES, REVIEW_STATES, canMove, movesFrom, nextState,
} from '#shared/domain/review/states'

/** Every limit still open, so that only the state decides. */
const open: ReviewFacts = { filmAskedCount: 0, notAnsweredCount: 0, stateBeforeNewFilm: 'waiting', quietMs: AUTO_CLOSE_AFTER_QUIET_MS }

/** Written by hand from the table of review states; a dot where the move is refused. */
const TABLE = `
                  draft     unpaid    waiting   in_hand   new_film  answered closed withdrawn
submit-by-credit  waiting   .         .         .         .         .        .      .
submit-to-pay     unpaid    .         .         .         .         .        .      .
pay               .         waiting   .         .         .         .        .      .
abandon-payment   .         draft     .         .         .         .        .      .
take-up           .         .         in_hand   .         .         .        .      .
put-back          .         .         .         waiting   .         .        .      .
move              .         .         .         waiting   .         .        .      .
ask-for-film      .         .         new_film  new_film  .         .        .      .
new-film-arrived  .         .         .         .         waiting   .        .      .
answer            .         .         .         answered  .         .        .      .
not-answered      .         .         .         .         .         in_hand  .      .
close             .         .         .         .         .         closed   .      .
auto-close        .         .         .         .         .         closed   .      .
withdraw          withdrawn withdrawn withdrawn withdrawn withdrawn .        .      .
`
const rows = TABLE.trim().split('\n').map(line => line.trim().split(/\s+/))
const cell = (move: ReviewMove, from: ReviewState): string | undefined =>
  rows.find(row => row[0] === move)?.[1 + (rows[0]?.indexOf(from) ?? Number.NaN)]

/** Who makes each move, by hand. */
const BY: Record<ReviewMove, ReviewRole[]> = {
  'submit-by-credit': ['student', 'guardian'],
  'submit-to-pay': ['student', 'guardian'],
  'pay': ['system'],
  'abandon-payment': ['system'],
  'take-up': ['coach'],
  'put-back': ['coach'],
  'move': ['owner'],
  'ask-for-film': ['coach'],
  'new-film-arrived': ['student', 'guardian', 'system'],
  'answer': ['coach'],
  'not-answered': ['student', 'guardian'],
  'close': ['student', 'guardian', 'coach'],
  'auto-close': ['system'],
  'withdraw': ['student', 'guardian', 'owner'],
}

const everyCase = REVIEW_MOVES.flatMap(move => REVIEW_STATES.map(from => ({ from, move, to: cell(move, from) })))

describe('nextState', () => {
  it('is tried for every state and move', () => {
    expect(everyCase).toHaveLength(8 * 14)
    expect(everyCase.every(one => one.to !== undefined)).toBe(true)
    expect(rows.map(row => row.length)).toEqual([8, ...Array.from({ length: 14 }, () => 9)])
  })
  it.each(everyCase)('$from, $move: $to', ({ from, move, to }) => {
    expect(nextState(from, move, open)).toEqual(to === '.' ? { ok: false, reason: 'wrong-state' } : { ok: true, to })
  })

  const refusals: [ReviewState, ReviewMove, Partial<ReviewFacts>, MoveRefusal | null][] = [
    ['waiting', 'ask-for-film', { filmAskedCount: FILM_ASKED_MAX_COUNT - 1 }, null],
    ['waiting', 'ask-for-film', { filmAskedCount: FILM_ASKED_MAX_COUNT }, 'film-asked-twice'],
    ['in_hand', 'ask-for-film', { filmAskedCount: 3 }, 'film-asked-twice'],
    ['answered', 'ask-for-film', { filmAskedCount: 3 }, 'wrong-state'],
    ['answered', 'not-answered', { notAnsweredCount: NOT_ANSWERED_MAX_COUNT }, 'said-not-answered'],
    ['new_film', 'new-film-arrived', { stateBeforeNewFilm: null }, 'state-before-unknown'],
    ['answered', 'auto-close', { quietMs: AUTO_CLOSE_AFTER_QUIET_MS - 1 }, 'not-quiet-long-enough'],
    ['answered', 'auto-close', { quietMs: undefined }, 'not-quiet-long-enough'],
    ['answered', 'auto-close', { quietMs: Number.NaN }, 'not-quiet-long-enough'],
    ['answered', 'close', { quietMs: 0 }, null],
  ]
  it.each(refusals)('%s, %s with %o: %s', (from, move, facts, reason) => {
    const next = nextState(from, move, { ...open, ...facts })
    expect(next.ok ? null : next.reason).toBe(reason)
  })

  it('goes back to where film was asked for', () => {
    expect(nextState('new_film', 'new-film-arrived', { ...open, stateBeforeNewFilm: 'in_hand' })).toEqual({ ok: true, to: 'in_hand' })
  })
  it('has the limits that are sold', () => {
    expect([FILM_ASKED_MAX_COUNT, NOT_ANSWERED_MAX_COUNT, AUTO_CLOSE_AFTER_QUIET_MS]).toEqual([2, 1, 1_209_600_000])
  })
})

describe('canMove', () => {
  it.each(REVIEW_MOVES)('%s', (move) => {
    expect(REVIEW_ROLES.filter(role => canMove(role, move))).toEqual(BY[move])
  })
})

describe('movesFrom', () => {
  it.each(REVIEW_STATES.flatMap(state => REVIEW_ROLES.map(role => ({ state, role }))))('$role, $state', ({ state, role }) => {
    const expected = everyCase.filter(one => one.from === state && one.to !== '.' && BY[one.move].includes(role)).map(one => one.move)
    expect(movesFrom(state, role, open)).toEqual(expected)
  })
  it('leaves out what is used up', () => {
    expect(movesFrom('in_hand', 'coach', { ...open, filmAskedCount: 2 })).toEqual(['put-back', 'answer'])
    expect(movesFrom('answered', 'student', { ...open, notAnsweredCount: 1 })).toEqual(['close'])
  })
})
