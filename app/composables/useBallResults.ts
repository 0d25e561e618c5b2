import type { MaybeRefOrGetter } from 'vue'
import type { SwingInput } from '#shared/schemas/swings'
import type { ClipBrief, ClipView } from '#shared/types/reviews'
import { readErrorAnswer } from '~/utils/errors'
import { findKeptSwings, forgetSwings, keepSwings } from '~/utils/kept-swings'
import type { SpanMs } from '~/utils/made-clip'

export type BallResult = Omit<SwingInput, 'fromMs' | 'toMs'>

/** What the ball did in each swing of one view. It is kept in this browser from the tap on, and by the studio once it has the clip. */
export function useBallResults(reviewId: MaybeRefOrGetter<string>, view: ClipView, clip: () => ClipBrief | undefined) {
  /** What was said here and may not have reached the studio yet. */
  const said = ref<SwingInput[]>()
  const swings = computed<SwingInput[]>(() => said.value ?? clip()?.swings.map(withoutId) ?? [])
  const autosave = useAutosave(save, 500)

  async function save() {
    const taken = clip()
    const { value } = said
    if (taken?.state !== 'accepted' || value === undefined) return
    try {
      await $fetch(`/api/clips/${taken.id}/swings`, { method: 'PUT', body: { swings: within(value, taken.durationMs) } })
    }
    catch (error) {
      // Another window sent the review: nothing more can be said, and nothing is to be tried again.
      if (readErrorAnswer(error).code === 'wrong-moment') forget()
      throw error
    }
    forgetSwings(toValue(reviewId), view)
  }

  function put(value: SwingInput[]) {
    said.value = value
    keepSwings(toValue(reviewId), view, value)
    if (clip()?.state === 'accepted') autosave.touch()
  }

  /** The swings of a clip that is about to be sent. */
  function begin(spans: SpanMs[]) {
    put(spans.map(span => ({ ...span, contact: null, flight: null, carryM: null, surface: null })))
  }

  function change(index: number, change: Partial<BallResult>) {
    put(swings.value.map((swing, at) => at === index ? { ...swing, ...change } : swing))
  }

  /** All of a clip's balls lie on the same ground, mostly; whoever says otherwise says it by swing. */
  function changeAll(change: Partial<BallResult>) {
    put(swings.value.map(swing => ({ ...swing, ...change })))
  }

  /** Brings what was tapped last to the studio. False when it could not be reached; what it refuses for good does not hold a review up. */
  async function flush(): Promise<boolean> {
    await autosave.flush()
    return autosave.problem.value?.isPassing !== true
  }

  /** The clip was taken away, or another one comes in its place. */
  function forget() {
    autosave.settle()
    said.value = undefined
    forgetSwings(toValue(reviewId), view)
  }

  /** What was said on an earlier visit and did not reach the studio. */
  function recall() {
    said.value ??= findKeptSwings(toValue(reviewId), view)
  }
  onMounted(recall)
  watch(() => [clip()?.id, clip()?.state, said.value !== undefined] as const, ([, state, hasSaid]) => {
    if (state === 'accepted' && hasSaid && findKeptSwings(toValue(reviewId), view) !== undefined) autosave.touch()
  })

  return { swings, begin, change, changeAll, forget, recall, flush, state: autosave.state, problem: autosave.problem }
}

function withoutId({ fromMs, toMs, contact, flight, carryM, surface }: SwingInput): SwingInput {
  return { fromMs, toMs, contact, flight, carryM, surface }
}

/** The server counts the clip's length by its own reading, which may end a hair sooner. */
function within(swings: SwingInput[], durationMs: number | null): SwingInput[] {
  if (durationMs === null) return swings
  return swings
    .map(swing => ({ ...swing, fromMs: Math.min(swing.fromMs, durationMs - 1), toMs: Math.min(swing.toMs, durationMs) }))
    .filter(({ fromMs, toMs }) => toMs > fromMs)
}
