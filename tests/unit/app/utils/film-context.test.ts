import { describe, expect, it } from 'vitest'
import type { ProfileView } from '#shared/types/profile'
import { filmContext } from '~/utils/film-context'

const profile: ProfileView = {
  birthDate: '1990-03-04', handedness: 'left', handicap: '', limits: '', goals: '', practicePlaces: [], sessionsPerWeek: null, minutesPerSession: null,
  clubs: [{ club: '7-iron', lengthM: 0.95, lieDeg: null, carryM: 137 }],
}

describe('what advice on film goes by', () => {
  it('takes the student’s own figures where there are some', () => {
    // A 7-iron nobody has measured lies at 62 degrees (shared/domain/clubs/defaults).
    expect(filmContext('7-iron', 'left', profile)).toEqual({ club: '7-iron', handedness: 'left', usualCarryM: 137, clubBuild: { lengthM: 0.95, lieDeg: 62 } })
  })

  it('takes the usual build without a profile, and none of a club that is not known', () => {
    expect(filmContext('driver', 'right', undefined).clubBuild).toEqual({ lengthM: 45 * 0.0254, lieDeg: 58 })
    expect(filmContext('chipper', 'right', undefined).clubBuild).toBeUndefined()
  })
})
