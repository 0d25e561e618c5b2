import type { FilmContext } from '#shared/domain/film/advice/context'
import type { Handedness } from '#shared/domain/clubs/handedness'
import { findDefaultClubBuild } from '#shared/domain/clubs/defaults'
import type { ProfileView } from '#shared/types/profile'

/** What advice on film goes by: the club in question, as the student owns it. */
export function filmContext(club: string, handedness: Handedness, profile: ProfileView | undefined): Omit<FilmContext, 'view' | 'saidFramesPerSecond'> {
  const own = profile?.clubs.find(one => one.club === club)
  const usual = findDefaultClubBuild(club)
  return {
    club,
    handedness,
    usualCarryM: own?.carryM ?? undefined,
    clubBuild: usual && { lengthM: own?.lengthM ?? usual.lengthM, lieDeg: own?.lieDeg ?? usual.lieDeg },
  }
}
