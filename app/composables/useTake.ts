import type { MaybeRefOrGetter } from 'vue'
import type { Advice, FilmContext } from '#shared/domain/film/advice/context'
import { FILM_REFUSALS, type FilmRefusalWords } from '#shared/domain/film/refusals'
import type { ClipView } from '#shared/types/reviews'
import type { OpenedClip, Progress, SpanS } from '~/film/prepare'
import { fitSwings, swingRange } from '~/utils/swing-spans'
import { madeFrom, type MadeClip } from '~/utils/made-clip'
import { NOT_LOADED, NOT_MADE } from '~/utils/take-words'

/** `choosing`: its swings are being chosen; `making`: it is made ready; `refused`: it cannot be used. */
type TakePhase = 'none' | 'reading' | 'choosing' | 'making' | 'refused'

/**
 * A clip chosen on this device, until it is made ready and handed on.
 * @param deliver hands the ready clip on; words when it could not be taken just now, else none
 */
export function useTake(
  view: ClipView,
  context: MaybeRefOrGetter<Omit<FilmContext, 'view' | 'saidFramesPerSecond'>>,
  deliver: (made: MadeClip) => Promise<string>,
) {
  const phase = ref<TakePhase>('none')
  const opened = shallowRef<OpenedClip>()
  // Shallow, since a worker takes no proxies.
  const swings = shallowRef<SpanS[]>([])
  const isLooking = ref(false)
  /** Frames a second it was filmed at, as the person says. */
  const said = ref<number>()
  const meanLuma = ref<number>()
  const progress = ref<Progress>()
  const refusal = shallowRef<FilmRefusalWords>()
  const problem = ref('')
  const advise = shallowRef<typeof import('#shared/domain/film/advice/advise').adviseOnFilm>()
  let hasTouched = false
  /** Made, and not taken yet: it need not be made again. */
  let made: MadeClip | undefined
  let controller = new AbortController()

  const advice = computed<Advice[]>(() => {
    if (opened.value === undefined || advise.value === undefined) return []
    const { facts } = opened.value
    return advise.value({ ...facts, meanLuma: meanLuma.value }, { ...toValue(context), view, saidFramesPerSecond: said.value })
  })
  const range = computed(() => opened.value && swingRange(opened.value.facts))

  function reset(to: TakePhase = 'none') {
    controller.abort()
    controller = new AbortController()
    opened.value?.close()
    opened.value = undefined
    made = undefined
    hasTouched = false
    swings.value = []
    said.value = undefined
    meanLuma.value = undefined
    problem.value = ''
    refusal.value = undefined
    isLooking.value = false
    phase.value = to
  }

  function refuse(words: FilmRefusalWords) {
    reset('refused')
    refusal.value = words
  }

  async function choose(file: File) {
    reset('reading')
    const { signal } = controller
    const [prepare, advising] = await Promise.all([import('~/film/prepare'), import('#shared/domain/film/advice/advise')]).catch(() => [])
    if (signal.aborted) return
    if (prepare === undefined || advising === undefined) return refuse({ title: 'Nothing was read.', whatToDo: NOT_LOADED })
    try {
      const clip = await prepare.openClip(file)
      if (signal.aborted) return clip.close()
      opened.value = clip
      const reason = prepare.findClipProblem(clip.facts)
      if (reason !== undefined) return refuse(FILM_REFUSALS[reason])
      advise.value = advising.adviseOnFilm
      swings.value = [swingRange(clip.facts)]
      phase.value = 'choosing'
      await Promise.all([suggest(clip, prepare, signal), measure(clip, prepare, signal)])
    }
    catch (error) {
      if (signal.aborted) return
      refuse(FILM_REFUSALS[error instanceof prepare.ClipProblem ? error.reason : 'unreadable'])
    }
  }

  async function suggest(clip: OpenedClip, { suggestSwings }: typeof import('~/film/prepare'), signal: AbortSignal) {
    isLooking.value = true
    const found = await suggestSwings(clip, { signal }).catch(() => [])
    if (signal.aborted) return
    isLooking.value = false
    // What a hand has moved meanwhile is not moved back.
    if (found.length > 0 && !hasTouched) swings.value = fitSwings(found, swingRange(clip.facts))
  }

  async function measure(clip: OpenedClip, { readFrameFacts }: typeof import('~/film/prepare'), signal: AbortSignal) {
    const facts = await readFrameFacts(clip).catch(() => undefined)
    if (!signal.aborted) meanLuma.value = facts?.meanBrightness
  }

  function change(to: SpanS[]) {
    hasTouched = true
    made = undefined
    problem.value = ''
    swings.value = to
  }

  /** Makes the chosen swings ready and hands them on. */
  async function keep() {
    const clip = opened.value
    if (clip === undefined || phase.value !== 'choosing') return
    const { signal } = controller
    phase.value = 'making'
    problem.value = ''
    progress.value = undefined
    const { ClipProblem, explainWay, prepareClip } = await import('~/film/prepare')
    try {
      if (made === undefined) {
        const prepared = await prepareClip(clip, { keep: swings.value, signal, onProgress: told => void (progress.value = told) })
        if (prepared.reason !== undefined) return refuse({ title: FILM_REFUSALS[prepared.reason].title, whatToDo: explainWay(prepared) })
        made = madeFrom(view, prepared, said.value)
      }
      problem.value = await deliver(made)
      if (problem.value === '') return reset()
    }
    catch (error) {
      if (signal.aborted) return
      problem.value = error instanceof ClipProblem ? `${FILM_REFUSALS[error.reason].title} ${FILM_REFUSALS[error.reason].whatToDo}` : NOT_MADE
    }
    phase.value = 'choosing'
  }

  /** Stops making and goes back to the swings as they were chosen. */
  function cancel() {
    controller.abort()
    controller = new AbortController()
    phase.value = 'choosing'
  }

  // A clip that is being made ready goes on when its page is left; it is sent from wherever the person is then.
  onScopeDispose(() => {
    if (phase.value !== 'making') reset()
  })

  return { phase, opened, range, swings, isLooking, said, progress, refusal, problem, advice, choose, change, keep, cancel, reset }
}
