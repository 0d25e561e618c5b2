import { FILM_REFUSALS } from '#shared/domain/film/refusals'
import type { PreparedClip, PrepareWay } from './prepared-clip'

const WORDS: Record<PrepareWay, string> = {
  're-encoded': 'Your clip was cut to your swings here on your device and made quick to step through. Sound, place and phone details are gone. Every frame is still there.',
  'cut-and-stripped': 'Your clip was good as it is. It was cut to your swings here on your device, and sound, place and phone details were taken out.',
  'remuxed': 'This browser cannot cut your clip, so all of it will be sent, also what you cut away. Sound, place and phone details were taken out.',
  'untouched': 'This browser cannot change your clip, so all of it will be sent as it is, with whatever it tells of your phone.',
}

/** What was done to a clip, for whoever sends it; for one that the server would not take, why, and what to do. */
export function explainWay({ way, reason }: Pick<PreparedClip, 'way' | 'reason'>): string {
  if (reason === undefined) return WORDS[way]
  const { title, whatToDo } = FILM_REFUSALS[reason]
  return `This browser cannot change your clip, and it cannot be sent as it is. ${title} ${whatToDo}`
}
