import type { FilmRefusal } from '#shared/domain/film/refusals'

/** The store did not give the bytes; nothing is known about the film, so the caller may try again later. */
export class StoreUnreachable extends Error {
  override readonly name = 'StoreUnreachable'
}

/** The worker never ran (its file is missing or broken); no fault of the film, and trying again will not help. */
export class FilmReaderBroken extends Error {
  override readonly name = 'FilmReaderBroken'
}

/** The file breaks a rule of its format or a limit; raised inside the worker only. */
export class UnsoundFilm extends Error {
  override readonly name = 'UnsoundFilm'

  constructor(readonly reason: FilmRefusal, detail: string) {
    super(detail)
  }
}
