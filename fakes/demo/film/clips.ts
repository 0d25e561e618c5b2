import type { ClipView } from '#shared/types/reviews'

/** The clips that the demo's students send. */
export const DEMO_CLIPS: Readonly<Record<ClipView, string>> = {
  face_on: 'tests/support/film/made/plain-30.mp4',
  down_the_line: 'tests/support/film/made/plain-30.mp4',
}
