import type { FilmView } from './context'

/** Where the phone stands for each view, in the order one sets it up; the drawing carries the same numbers. */
export const STAND_STEPS: Readonly<Record<FilmView, readonly string[]>> = {
  face_on: [
    'Stand the phone facing you, square to the target line at the ball.',
    'Lens at the height of your hands, phone upright and still on something.',
    'Four to five big steps from the ball. Three is too close.',
    'Lay a T of two clubs: one along your toes, one toward the ball. Film it, then lift the second away before you swing.',
    'Nobody and nothing in the way of club or ball.',
  ],
  down_the_line: [
    'Stand the phone behind you on a line through your hands that runs the way of the target line.',
    'Lens at the height of your hands, phone upright and still on something.',
    'Four to five big steps from your hands. Three is too close.',
    'Lay a T of two clubs: one along your toes, one toward the ball. Film it, then lift the second away before you swing.',
    'Nobody and nothing in the way of club or ball.',
  ],
}

export const STAND_ERRORS = ['too-close', 'tilted', 'wrong-lens', 'toe-line', 'line-of-fire'] as const
export type StandError = typeof STAND_ERRORS[number]

export interface StandErrorWords {
  title: string
  whatToDo: string
  /** Views it happens in. */
  views: readonly FilmView[]
}

/** The usual errors, fit to stand under a drawing and to tell why film goes back. */
export const STAND_ERROR_WORDS: Readonly<Record<StandError, StandErrorWords>> = {
  'too-close': {
    title: 'Too close',
    whatToDo: 'The club leaves the picture and sizes are bent. Go back to four or five big steps.',
    views: ['face_on', 'down_the_line'],
  },
  'tilted': {
    title: 'Phone tilted or low',
    whatToDo: 'Looking up or down bends every angle. Stand it upright with the lens at hand height.',
    views: ['face_on', 'down_the_line'],
  },
  'wrong-lens': {
    title: 'Wide or selfie lens',
    whatToDo: 'A wide lens bends lines, a selfie lens swaps left and right. Use the ordinary lens on the back, at 1×.',
    views: ['face_on', 'down_the_line'],
  },
  'toe-line': {
    title: 'On the toe line',
    whatToDo: 'From there the club looks as if it came from outside. Move over to the line through your hands.',
    views: ['down_the_line'],
  },
  'line-of-fire': {
    title: 'In the line of fire',
    whatToDo: 'Phone and people never stand ahead of the ball or inside the swing. Keep them square to it or behind.',
    views: ['face_on', 'down_the_line'],
  },
}
