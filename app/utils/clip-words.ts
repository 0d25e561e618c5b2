import type { ClipBrief, ClipView } from '#shared/types/reviews'

const VIEW_WORDS: Record<ClipView, string> = { face_on: 'Face-on', down_the_line: 'Down the line' }

/** The trade's name of a view, fit for a label. */
export function viewWords(view: ClipView): string {
  return VIEW_WORDS[view]
}

/** `Face-on and down the line`, within a line of facts; empty for none. */
export function viewsWords(views: readonly ClipView[]): string {
  const words = (['face_on', 'down_the_line'] as const).filter(view => views.includes(view)).map(viewWords)
  return words.map((word, index) => index === 0 ? word : word.toLowerCase()).join(' and ')
}

/** `5.2 MB`, as phones count them (a million bytes); under a tenth is `0.1 MB`. */
export function formatMegabytes(bytes: number): string {
  return `${Math.max(bytes / 1_000_000, 0.1).toFixed(1)} MB`
}

/** `3.1 s · 240 frames a second`, from what the server read; parts it could not read are left out. */
export function clipTiming(clip: Pick<ClipBrief, 'durationMs' | 'framesPerSecond'>): string {
  return [
    clip.durationMs === null ? '' : `${(clip.durationMs / 1000).toFixed(1)} s`,
    clip.framesPerSecond === null ? '' : `${Math.round(clip.framesPerSecond)} frames a second`,
  ].filter(Boolean).join(' · ')
}

/** `3.1 s · 240 frames a second · 1080 × 1920`. */
export function clipFacts(clip: Pick<ClipBrief, 'durationMs' | 'framesPerSecond' | 'widthPx' | 'heightPx'>): string {
  const size = clip.widthPx === null || clip.heightPx === null ? '' : `${clip.widthPx} × ${clip.heightPx}`
  return [clipTiming(clip), size].filter(Boolean).join(' · ')
}
