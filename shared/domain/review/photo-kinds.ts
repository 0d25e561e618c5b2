/** What a photograph can settle that film cannot: where the club met the ground and the ball, and how the hands hold it. */
export const PHOTO_KINDS = ['ground_mark', 'face_mark', 'grip'] as const
export type PhotoKind = typeof PHOTO_KINDS[number]

/** As read on a label. */
export const PHOTO_KIND_WORDS: Readonly<Record<PhotoKind, string>> = {
  ground_mark: 'The mark on the ground, against a line',
  face_mark: 'The strike mark on the face',
  grip: 'The grip, from two sides',
}

/** Two grounds, two faces and the grip from two sides. */
export const PHOTO_MAX_COUNT = 6
