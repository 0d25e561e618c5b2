import type { ClipView } from '#shared/types/reviews'
import type { OutfitName } from './outfits'
import type { ClubKind, Contact, Hands, Release } from './swing-kinds'

export interface FilmSwing {
  release: Release
  contact: Contact
}

/** A clip of the demo as it is rendered: nothing but this list decides what `made/` holds. */
export interface FilmClip {
  name: string
  view: ClipView
  hands: Hands
  club: ClubKind
  framesPerSecond: 120 | 240
  outfit: OutfitName
  swings: readonly FilmSwing[]
}

const SOUND: FilmSwing = { release: 'sound', contact: 'solid' }
const EARLY: FilmSwing = { release: 'early', contact: 'solid' }

export const FILM_CLIPS = [
  { name: 'right-sound-face-on', view: 'face_on', hands: 'right', club: '7-iron', framesPerSecond: 240, outfit: 'joel', swings: [SOUND] },
  { name: 'right-early-face-on', view: 'face_on', hands: 'right', club: '7-iron', framesPerSecond: 240, outfit: 'joel', swings: [EARLY] },
  { name: 'right-early-down-the-line', view: 'down_the_line', hands: 'right', club: '7-iron', framesPerSecond: 240, outfit: 'joel', swings: [EARLY] },
  { name: 'right-sound-down-the-line', view: 'down_the_line', hands: 'right', club: '7-iron', framesPerSecond: 120, outfit: 'joel', swings: [SOUND] },
  { name: 'left-early-face-on', view: 'face_on', hands: 'left', club: '7-iron', framesPerSecond: 240, outfit: 'noor', swings: [EARLY] },
  { name: 'left-sound-down-the-line', view: 'down_the_line', hands: 'left', club: '7-iron', framesPerSecond: 120, outfit: 'noor', swings: [SOUND] },
  { name: 'right-three-face-on', view: 'face_on', hands: 'right', club: '7-iron', framesPerSecond: 120, outfit: 'joel', swings: [
    SOUND, { release: 'early', contact: 'fat' }, { release: 'early', contact: 'thin' },
  ] },
  { name: 'right-driver-face-on', view: 'face_on', hands: 'right', club: 'driver', framesPerSecond: 240, outfit: 'wen', swings: [SOUND] },
] as const satisfies readonly FilmClip[]

export type FilmClipName = typeof FILM_CLIPS[number]['name']

/** Where a clip of this list lies, from the root of the repository. */
export function madeClipPath(name: FilmClipName, kind: 'mp4' | 'json'): string {
  return `fakes/demo/film/made/${name}.${kind}`
}

/** Three swings in front, of which the heavy and the thin one let go early, and one from behind. */
const RIGHT_IRON: Readonly<Record<ClipView, string>> = {
  face_on: madeClipPath('right-three-face-on', 'mp4'),
  down_the_line: madeClipPath('right-early-down-the-line', 'mp4'),
}

/** The clips that the demo's students send. */
export const DEMO_CLIPS: Readonly<Record<'right' | 'left' | 'driver', Readonly<Record<ClipView, string>>>> = {
  right: RIGHT_IRON,
  left: { face_on: madeClipPath('left-early-face-on', 'mp4'), down_the_line: madeClipPath('left-sound-down-the-line', 'mp4') },
  driver: { ...RIGHT_IRON, face_on: madeClipPath('right-driver-face-on', 'mp4') },
}
