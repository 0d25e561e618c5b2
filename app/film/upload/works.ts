import type { PreparedAs } from '#shared/types/reviews'
import type { FilmKeeper } from './keep/film-keeper'
import type { KeptFilm } from './keep/kept-film'
import { forgetFilm } from './keep/shelf'

/** What preparing a file took out of it, told beside it. */
export interface ToldOfClip {
  captureFramesPerSecond?: number
  preparedAs?: PreparedAs
}

/** What belongs to a film on its way and cannot be drawn. */
export interface Work {
  /** One for each choice of a file: a clip begun again under it is the same clip. */
  key: string
  /** Undefined for a film that goes on from its copy on the device. */
  file: File | undefined
  told: ToldOfClip
  /** Undefined until the server knows the clip. */
  film: KeptFilm | undefined
  keeper: FilmKeeper | undefined
  controller: AbortController
  /** Settles when what the work did last has wound down, so that it does not meet its own locks. Never rejects. */
  ended: Promise<void>
}

/** The works of one page by the place on the screen that they belong to; a place has one at most. */
export class Works {
  readonly #bySlot = new Map<string, Work>()

  find(slot: string): Work | undefined {
    return this.#bySlot.get(slot)
  }

  /** Takes the place of what was there, whose copy on the device stays. */
  open(slot: string, what: Partial<Pick<Work, 'file' | 'film' | 'told'>>): void {
    const ended = this.#bySlot.get(slot)?.ended ?? Promise.resolve()
    this.#close(slot)
    this.#bySlot.set(slot, { key: crypto.randomUUID(), file: what.file, told: what.told ?? {}, film: what.film, keeper: undefined, controller: new AbortController(), ended })
  }

  /** Calls off what the work was doing, waits until it has, and does the next thing under a fresh signal. `act` must not throw. */
  async restart(slot: string, act: (work: Work, signal: AbortSignal) => Promise<void>): Promise<void> {
    this.halt(slot)
    const work = this.#bySlot.get(slot)
    if (work === undefined) return
    const { signal } = work.controller = new AbortController()
    work.ended = work.ended.then(() => signal.aborted ? undefined : act(work, signal))
    await work.ended
  }

  /** Calls off the sending; the copying onto the device goes on. */
  halt(slot: string): void {
    this.#bySlot.get(slot)?.controller.abort()
  }

  /** Ends the work and removes its copy from the device. */
  end(slot: string): void {
    const film = this.#bySlot.get(slot)?.film
    this.#close(slot)
    if (film !== undefined) void forgetFilm(film.clipId)
  }

  #close(slot: string): void {
    this.halt(slot)
    this.#bySlot.get(slot)?.keeper?.close()
    this.#bySlot.delete(slot)
  }
}
