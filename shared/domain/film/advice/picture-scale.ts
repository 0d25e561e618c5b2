import { apparentClubLengthM } from '#shared/domain/clubs/apparent-length'
import type { ClubBuild } from '#shared/domain/clubs/defaults'
import type { FilmView } from './context'

/** Standing height when nobody says it; round, ours, for a rough scale only. */
const USUAL_PERSON_HEIGHT_M = 1.7

/** Bent over the ball one is lower than standing; rough, ours, no published source. */
const ADDRESS_SHARE_OF_HEIGHT = 0.9

export type PictureScale
  = | { kind: 'known', millimetresPerPixel: number, from: 'club' | 'person' }
    | { kind: 'unknown' }

export interface ScaleSigns {
  view: FilmView
  heightPx: number
  /** Grip end to sole at address, along the club in the upright picture. */
  clubSpanPx?: number
  club?: ClubBuild
  /** Sole of the shoes to top of the head at address, as a share of the picture's height. */
  personShareOfHeight?: number
  /** Standing. */
  personHeightM?: number
}

/**
 * What one pixel covers at the depth of a known length that lies square to the camera.
 *
 * @param lengthM above 0
 * @param spanPx 1 or more: within one pixel nothing can be told apart
 * @returns millimetres; undefined for anything else
 */
export function millimetresPerPixel(lengthM: number, spanPx: number): number | undefined {
  const millimetres = lengthM * 1000 / spanPx
  return lengthM > 0 && spanPx >= 1 && Number.isFinite(millimetres) && millimetres > 0 ? millimetres : undefined
}

/**
 * The picture's scale from the best sign there is: the club at address (face-on it shows L · sin(lie)), else, roughly,
 * how much of the picture's height the golfer fills. A file alone holds neither, and then the answer says so.
 */
export function findPictureScale(signs: ScaleSigns): PictureScale {
  const byClub = signs.club && signs.clubSpanPx !== undefined
    ? millimetresPerPixel(apparentClubLengthM(signs.view, signs.club), signs.clubSpanPx)
    : undefined
  if (byClub !== undefined)
    return { kind: 'known', millimetresPerPixel: byClub, from: 'club' }
  const share = signs.personShareOfHeight
  if (share === undefined || !(share > 0 && share <= 1))
    return { kind: 'unknown' }
  const addressM = (signs.personHeightM ?? USUAL_PERSON_HEIGHT_M) * ADDRESS_SHARE_OF_HEIGHT
  const byPerson = millimetresPerPixel(addressM, share * signs.heightPx)
  return byPerson === undefined ? { kind: 'unknown' } : { kind: 'known', millimetresPerPixel: byPerson, from: 'person' }
}
