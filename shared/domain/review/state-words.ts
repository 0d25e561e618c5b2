import type { ReviewState } from './states'

/** Who reads; `system` reads nothing. */
export type ReviewReader = 'student' | 'guardian' | 'coach' | 'owner'

const WORDS: Readonly<Record<ReviewState, Readonly<Record<ReviewReader, string>>>> = {
  draft: {
    student: 'Not sent yet',
    guardian: 'Not sent yet',
    coach: 'Not sent yet',
    owner: 'Not sent yet',
  },
  unpaid: {
    student: 'Waiting for your payment',
    guardian: 'Waiting for your payment',
    coach: 'Not paid yet',
    owner: 'Not paid yet',
  },
  waiting: {
    student: 'Waiting for your coach',
    guardian: 'Waiting for the coach',
    coach: 'In the queue',
    owner: 'Waiting for a coach',
  },
  in_hand: {
    student: 'Your coach is at work on it',
    guardian: 'The coach is at work on it',
    coach: 'In hand',
    owner: 'In hand',
  },
  new_film: {
    student: 'Your coach asks for new film',
    guardian: 'The coach asks for new film',
    coach: 'Waiting for new film',
    owner: 'Waiting for new film',
  },
  answered: {
    student: 'Answered',
    guardian: 'Answered',
    coach: 'Answered',
    owner: 'Answered',
  },
  closed: {
    student: 'Closed',
    guardian: 'Closed',
    coach: 'Closed',
    owner: 'Closed',
  },
  withdrawn: {
    student: 'Withdrawn',
    guardian: 'Withdrawn',
    coach: 'Withdrawn',
    owner: 'Withdrawn',
  },
}

/** A review's state in the reader's words, without a full stop, fit for a label. */
export function stateWords(state: ReviewState, reader: ReviewReader): string {
  return WORDS[state][reader]
}
