import { judgeFilm } from '#shared/domain/film/judge'
import type { FilmRefusal } from '#shared/domain/film/refusals'
import { FILM_REFUSALS } from '#shared/domain/film/refusals'
import type { ClipFacts } from './clip-facts'

/** A clip that cannot be used, with the reason whose words stand in `FILM_REFUSALS`. */
export class ClipProblem extends Error {
  constructor(readonly reason: FilmRefusal, detail = '') {
    super(detail === '' ? FILM_REFUSALS[reason].title : `${FILM_REFUSALS[reason].title} (${detail})`)
    this.name = 'ClipProblem'
  }
}

/**
 * What stands against a clip whatever is done with it here, told before anybody spends time on it. Length, size, sound
 * and place are no problem yet: preparing takes them away.
 *
 * @returns undefined for a clip that can be prepared
 */
export function findClipProblem(facts: ClipFacts): FilmRefusal | undefined {
  return judgeFilm(canReencode(facts) ? { ...asPrepared(facts), codec: 'avc', codecString: 'avc1.640028' } : asPrepared(facts))
}

/** Whether this browser can make a new film out of this one. */
export function canReencode({ canDecode, encoder }: Pick<ClipFacts, 'canDecode' | 'encoder'>): boolean {
  return canDecode && encoder !== undefined
}

function asPrepared(facts: ClipFacts): ClipFacts {
  return { ...facts, bytes: 0, durationMs: 0, hasSound: false, hasLocation: false }
}
