import { describe, expect, it } from 'vitest'
import type { ReviewReader } from '#shared/domain/review/state-words'
import { stateWords } from '#shared/domain/review/state-words'
import { REVIEW_STATES } from '#shared/domain/review/states'

const readers: ReviewReader[] = ['student', 'guardian', 'coach', 'owner']

describe('stateWords', () => {
  it('speaks to the reader', () => {
    expect(stateWords('waiting', 'student')).toBe('Waiting for your coach')
    expect(stateWords('waiting', 'coach')).toBe('In the queue')
    expect(stateWords('new_film', 'student')).toBe('Your coach asks for new film')
    expect(stateWords('new_film', 'coach')).toBe('Waiting for new film')
  })
  it.each(readers)('tells every state apart for a %s, as a label', (reader) => {
    const words = REVIEW_STATES.map(state => stateWords(state, reader))
    expect(new Set(words).size).toBe(REVIEW_STATES.length)
    for (const label of words) expect(label).toMatch(/^[A-Z][^.!]{4,31}$/)
  })
  it('calls nobody "your coach" but the student\'s own', () => {
    for (const reader of readers.filter(one => one !== 'student')) {
      expect(REVIEW_STATES.filter(state => stateWords(state, reader).includes('our coach'))).toEqual([])
    }
  })
})
