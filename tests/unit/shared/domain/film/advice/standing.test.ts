import { describe, expect, it } from 'vitest'
import { STAND_ERROR_WORDS, STAND_ERRORS, STAND_STEPS } from '#shared/domain/film/advice/standing'

describe('where the phone stands', () => {
  it('says for both views how high, how far, and that nobody is in the way', () => {
    for (const steps of Object.values(STAND_STEPS)) {
      const text = steps.join(' ')
      expect(text).toContain('Lens at the height of your hands')
      expect(text).toContain('Four to five big steps')
      expect(text).toContain('lift the second away before you swing')
      expect(text).toContain('Nobody and nothing in the way')
    }
  })

  it('keeps the two lines apart', () => {
    expect(STAND_STEPS.face_on[0]).toContain('square to the target line at the ball')
    expect(STAND_STEPS.down_the_line[0]).toContain('line through your hands')
  })

  it('names for each usual error what to do, and the toe line only down the line', () => {
    for (const error of STAND_ERRORS) expect(STAND_ERROR_WORDS[error].whatToDo).toMatch(/\.$/)
    expect(STAND_ERRORS.filter(error => !STAND_ERROR_WORDS[error].views.includes('face_on'))).toEqual(['toe-line'])
  })
})
