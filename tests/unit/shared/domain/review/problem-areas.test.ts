import { describe, expect, it } from 'vitest'
import { PROBLEM_AREAS, PROBLEM_AREA_WORDS, problemAreaWords } from '#shared/domain/review/problem-areas'

describe('problem areas', () => {
  it('have words each of their own', () => {
    expect(PROBLEM_AREAS.map(problemAreaWords)).toEqual(['Driving', 'Full swing', 'Part shots', 'Around the green', 'Sand', 'Putting', 'On the course'])
    expect(Object.keys(PROBLEM_AREA_WORDS)).toEqual([...PROBLEM_AREAS])
  })
  it('show an unknown key as it is, an inherited name too', () => {
    expect(['', 'bunkers', 'toString'].map(problemAreaWords)).toEqual(['', 'bunkers', 'toString'])
  })
})
