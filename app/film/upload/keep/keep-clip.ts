import type { ClipBrief } from '#shared/types/reviews'
import { KEPT_MS, type KeptFilm } from './kept-film'
import { findKept, insertKept, listKept } from './ledger'
import { forgetFilm, listFolders } from './shelf'

/**
 * Notes that a clip is being sent, before any of its bytes are copied; one that was begun before keeps its notes.
 * Never fails: without a database the film is sent all the same, from the chosen file, and only a reload ends it.
 */
export async function noteClip(begun: Pick<KeptFilm, 'reviewId' | 'viewerId' | 'partBytes'> & { clip: ClipBrief }, nowMs: number): Promise<KeptFilm> {
  const fresh: KeptFilm = { ...begun, clipId: begun.clip.id, keptAtMs: nowMs, doneNumbers: [], isWhole: false, isPaused: false }
  try {
    const film = await findKept(fresh.clipId) ?? fresh
    await insertKept(film)
    return film
  }
  catch {
    return fresh
  }
}

/**
 * Films that lie on this device whole and wait to be sent by this person, the newest last. What is older than a day or has lost its
 * record is removed on the way.
 */
export async function listWaitingFilms(viewerId: string, nowMs: number): Promise<KeptFilm[]> {
  try {
    const films = await listKept()
    const fresh = films.filter(film => nowMs - film.keptAtMs < KEPT_MS)
    const known = new Set(fresh.map(film => film.clipId))
    for (const clipId of new Set([...films.map(film => film.clipId), ...await listFolders()])) {
      if (!known.has(clipId)) await forgetFilm(clipId)
    }
    return fresh.filter(film => film.isWhole && film.viewerId === viewerId).sort((a, b) => a.keptAtMs - b.keptAtMs)
  }
  catch {
    return []
  }
}
