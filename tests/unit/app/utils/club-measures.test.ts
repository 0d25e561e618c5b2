import { describe, expect, it } from 'vitest'
import { clubLengthProblem } from '#shared/domain/clubs/limits'
import { measureText, readMeasure, readNumber } from '~/utils/club-measures'

describe('measures of a club as they are typed', () => {
  // 1 in is 25.4 mm and 1 yd is 0.9144 m by definition (international yard and pound agreement, 1959).
  it('are kept in metres', () => {
    expect(readMeasure('37', 'in')).toBe(0.9398)
    expect(readMeasure('94,5', 'cm')).toBe(0.945)
    expect(readMeasure('150', 'yd')).toBe(137.16)
    expect(readMeasure(' ', 'in')).toBeNull()
  })

  it('are no number when they are none', () => {
    expect(readMeasure('long', 'in')).toBeNaN()
    expect(readNumber('6o')).toBeNaN()
    expect(readNumber('61.5')).toBe(61.5)
  })

  it('are written as people say them', () => {
    expect(measureText(0.9398, 'in')).toBe('37')
    expect(measureText(0.9398, 'cm')).toBe('93.98')
    expect(measureText(137.16, 'yd')).toBe('150')
    expect(measureText(null, 'cm')).toBe('')
  })

  it('do not cross the limit by rounding', () => {
    expect(clubLengthProblem('driver', readMeasure('48', 'in') ?? 0)).toBeUndefined()
    expect(clubLengthProblem('putter', readMeasure('18', 'in') ?? 0)).toBeUndefined()
  })
})
