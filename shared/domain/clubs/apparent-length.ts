import type { ClubBuild } from './defaults'

/**
 * How long a club at address looks, as a length square to the camera.
 *
 * Face-on the club leans away from the camera and shows L · sin(lie); down the line it is seen at its whole length.
 * The hands are taken to hold it at its lie, sole flat.
 *
 * @param build length in metres above 0, lie in degrees within 0 and 90
 * @returns metres, at most the length
 */
export function apparentClubLengthM(view: 'face_on' | 'down_the_line', build: ClubBuild): number {
  return view === 'face_on' ? build.lengthM * Math.sin(build.lieDeg * Math.PI / 180) : build.lengthM
}
