export const REVIEW_STATES = ['draft', 'unpaid', 'waiting', 'in_hand', 'new_film', 'answered', 'closed', 'withdrawn'] as const
export type ReviewState = typeof REVIEW_STATES[number]

/** Who moves a review. `system` is a payment event or the passing of time. An owner who coaches moves as both. */
export const REVIEW_ROLES = ['student', 'guardian', 'coach', 'owner', 'system'] as const
export type ReviewRole = typeof REVIEW_ROLES[number]

export const REVIEW_MOVES = [
  'submit-by-credit', 'submit-to-pay', 'pay', 'abandon-payment', 'take-up', 'put-back', 'move', 'ask-for-film', 'new-film-arrived',
  'answer', 'not-answered', 'close', 'auto-close', 'withdraw',
] as const
export type ReviewMove = typeof REVIEW_MOVES[number]

export const FILM_ASKED_MAX_COUNT = 2
export const NOT_ANSWERED_MAX_COUNT = 1
export const AUTO_CLOSE_AFTER_QUIET_MS = 14 * 86_400_000

interface MoveRule {
  from: readonly ReviewState[]
  /** `as-before`: where the review stood when film was asked for. */
  to: ReviewState | 'as-before'
  by: readonly ReviewRole[]
}

const STUDENT_SIDE = ['student', 'guardian'] as const satisfies readonly ReviewRole[]

/** The whole life of a review: every move, where it may begin, where it leads and who makes it. */
export const REVIEW_MOVE_RULES: Readonly<Record<ReviewMove, MoveRule>> = {
  'submit-by-credit': { from: ['draft'], to: 'waiting', by: STUDENT_SIDE },
  'submit-to-pay': { from: ['draft'], to: 'unpaid', by: STUDENT_SIDE },
  'pay': { from: ['unpaid'], to: 'waiting', by: ['system'] },
  'abandon-payment': { from: ['unpaid'], to: 'draft', by: ['system'] },
  'take-up': { from: ['waiting'], to: 'in_hand', by: ['coach'] },
  'put-back': { from: ['in_hand'], to: 'waiting', by: ['coach'] },
  'move': { from: ['in_hand'], to: 'waiting', by: ['owner'] },
  'ask-for-film': { from: ['waiting', 'in_hand'], to: 'new_film', by: ['coach'] },
  'new-film-arrived': { from: ['new_film'], to: 'as-before', by: [...STUDENT_SIDE, 'system'] },
  'answer': { from: ['in_hand'], to: 'answered', by: ['coach'] },
  'not-answered': { from: ['answered'], to: 'in_hand', by: STUDENT_SIDE },
  'close': { from: ['answered'], to: 'closed', by: [...STUDENT_SIDE, 'coach'] },
  'auto-close': { from: ['answered'], to: 'closed', by: ['system'] },
  // Whoever may end it must be able to at any time before the answer, so also while new film is awaited.
  'withdraw': { from: ['draft', 'unpaid', 'waiting', 'in_hand', 'new_film'], to: 'withdrawn', by: [...STUDENT_SIDE, 'owner'] },
}

/** What a move depends on beside the state. */
export interface ReviewFacts {
  /** How often new film was asked for. */
  filmAskedCount: number
  /** How often the student said that the answer does not answer. */
  notAnsweredCount: number
  /** Where the review stood when film was asked for last; null when it never was. */
  stateBeforeNewFilm: 'waiting' | 'in_hand' | null
  /** How long nobody has written in the thread; left out counts as no time at all. */
  quietMs?: number
}

export type MoveRefusal = 'wrong-state' | 'film-asked-twice' | 'said-not-answered' | 'state-before-unknown' | 'not-quiet-long-enough'

export type NextState = { ok: true, to: ReviewState } | { ok: false, reason: MoveRefusal }

/**
 * Where a move leads. Who may make it is `canMove`; this says only whether the moment is right. `wrong-state` comes before
 * every other reason. `closed` and `withdrawn` lead nowhere.
 */
export function nextState(from: ReviewState, move: ReviewMove, facts: ReviewFacts): NextState {
  const rule = REVIEW_MOVE_RULES[move]
  if (!rule.from.includes(from)) return { ok: false, reason: 'wrong-state' }
  if (move === 'ask-for-film' && facts.filmAskedCount >= FILM_ASKED_MAX_COUNT) return { ok: false, reason: 'film-asked-twice' }
  if (move === 'not-answered' && facts.notAnsweredCount >= NOT_ANSWERED_MAX_COUNT) return { ok: false, reason: 'said-not-answered' }
  if (move === 'auto-close' && !((facts.quietMs ?? 0) >= AUTO_CLOSE_AFTER_QUIET_MS)) return { ok: false, reason: 'not-quiet-long-enough' }
  const to = rule.to === 'as-before' ? facts.stateBeforeNewFilm : rule.to
  return to ? { ok: true, to } : { ok: false, reason: 'state-before-unknown' }
}

/** Whether a role makes this move at all, whatever the state. */
export function canMove(role: ReviewRole, move: ReviewMove): boolean {
  return REVIEW_MOVE_RULES[move].by.includes(role)
}

/** The moves a role may make now, in the order of REVIEW_MOVES; empty when there are none. */
export function movesFrom(state: ReviewState, role: ReviewRole, facts: ReviewFacts): ReviewMove[] {
  return REVIEW_MOVES.filter(move => canMove(role, move) && nextState(state, move, facts).ok)
}
