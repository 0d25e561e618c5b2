import type { MaybeRefOrGetter } from 'vue'
import type { FilmContext } from '#shared/domain/film/advice/context'
import type { ClipView } from '#shared/types/reviews'
import { forgetPrepared } from '~/film/prepare/device-storage'
import { forgetFilm, keepFilm, listKeptFilm, type KeptFilm } from '~/film/kept/kept-film'
import { forgetQuestion } from '~/utils/kept-question'
import { findKeptSwings, forgetSwings, keepSwings } from '~/utils/kept-swings'
import type { MadeClip } from '~/utils/made-clip'
import { NOT_DELIVERED, NOT_KEPT } from '~/utils/take-words'

const VIEWS = ['face_on', 'down_the_line'] as const satisfies readonly ClipView[]
/** Stands for the review that there is not yet. */
const BEFORE_ACCOUNT = 'before-account'

/** Both clips of a question: chosen and made ready here, then sent; or kept in this browser while nobody is signed in. */
export function useFilmStep(review: ReturnType<typeof useNewReview>, clips: ReturnType<typeof useClips>, context: MaybeRefOrGetter<Omit<FilmContext, 'view'>>) {
  const kept = ref<Partial<Record<ClipView, KeptFilm>>>({})
  const slotId = () => review.reviewId.value ?? BEFORE_ACCOUNT

  function partsOf(view: ClipView) {
    const balls = useBallResults(slotId, view, () => clips.clipOf(view))
    const take = useTake(view, context, made => review.isVisitor ? keepHere(made) : send(made))
    return { view, balls, take }
  }
  const parts: Record<ClipView, ReturnType<typeof partsOf>> = { face_on: partsOf('face_on'), down_the_line: partsOf('down_the_line') }

  async function send(made: MadeClip): Promise<string> {
    const { view, spans } = made
    const id = await review.ensureDraft()
    if (id === undefined) return NOT_DELIVERED
    if (clips.clipOf(view) !== undefined || clips.uploadOf(view) !== undefined) await remove(view)
    if (clips.problem.value !== undefined) return clips.problem.value
    parts[view].balls.begin(spans)
    void clips.store.send(id, view, made.file, toldOf(made)).then(async () => {
      if (clips.uploadOf(view)?.phase === 'done') await forgetPrepared(made)
    })
    return ''
  }

  async function keepHere(made: MadeClip): Promise<string> {
    try {
      await keepFilm(made)
    }
    catch {
      return NOT_KEPT
    }
    parts[made.view].balls.begin(made.spans)
    // From where it lies now: the copy that it was made into goes.
    await recall()
    await forgetPrepared(made)
    review.touch()
    return ''
  }

  async function remove(view: ClipView) {
    parts[view].balls.forget()
    if (review.isVisitor) {
      await forgetFilm(view)
      kept.value = { ...kept.value, [view]: undefined }
      return
    }
    await clips.remove(view)
  }

  /** Shows a visitor what lies in this browser already. */
  async function recall() {
    const found = await listKeptFilm()
    kept.value = Object.fromEntries(found.map(film => [film.view, film]))
  }

  /** Sends what was asked before there was an account. False when the studio could not be reached: all of it stays here. */
  async function takeOver(): Promise<boolean> {
    const found = await listKeptFilm()
    review.touch()
    const id = await review.ensureDraft()
    if (id === undefined) return false
    for (const view of VIEWS) {
      const swings = findKeptSwings(BEFORE_ACCOUNT, view)
      if (swings === undefined) continue
      keepSwings(id, view, swings)
      parts[view].balls.recall()
      forgetSwings(BEFORE_ACCOUNT, view)
    }
    forgetQuestion()
    for (const { view, file, ...about } of found) {
      void clips.store.send(id, view, file, toldOf(about)).then(async () => {
        if (clips.uploadOf(view)?.phase === 'done') await forgetFilm(view)
      })
    }
    return true
  }

  /** True when the studio has all that was said of the balls. */
  async function flush(): Promise<boolean> {
    const all = await Promise.all(VIEWS.map(view => parts[view].balls.flush()))
    return all.every(Boolean)
  }

  return { parts, kept, remove, recall, takeOver, flush }
}

/** What goes with the file; a rate that is not known is not told. */
function toldOf({ preparedAs, captureFramesPerSecond }: Pick<KeptFilm, 'preparedAs' | 'captureFramesPerSecond'>) {
  return { preparedAs, ...captureFramesPerSecond === undefined ? {} : { captureFramesPerSecond } }
}
