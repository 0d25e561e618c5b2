export const HANDEDNESSES = ['right', 'left'] as const
export type Handedness = typeof HANDEDNESSES[number]

/** As read in a sentence. */
export const HANDEDNESS_WORDS: Readonly<Record<Handedness, string>> = { right: 'right-handed', left: 'left-handed' }

/** As a noun: "a left-hander". */
export const HANDER_WORDS: Readonly<Record<Handedness, string>> = { right: 'right-hander', left: 'left-hander' }

/** The side of the body nearer to the target. */
export function leadSide(handedness: Handedness): 'left' | 'right' {
  return handedness === 'right' ? 'left' : 'right'
}

/** The side of the body farther from the target. */
export function trailSide(handedness: Handedness): 'left' | 'right' {
  return handedness
}

/**
 * Where the target lies in a face-on picture that is not mirrored: +1 to the right, −1 to the left.
 * The golfer looks at the camera, so a right-hander's lead side is on the picture's right.
 */
export function targetSignFaceOn(handedness: Handedness): 1 | -1 {
  return handedness === 'right' ? 1 : -1
}
