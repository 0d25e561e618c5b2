import type { MaybeRefOrGetter } from 'vue'
import type { DraftView, LetterDraft, ReviewView } from '#shared/types/reviews'
import { isSameLetter, judgeKeptLetter, type KeptLetter } from '~/utils/kept-letter'
import { readErrorAnswer } from '~/utils/errors'

const EMPTY_LETTER: LetterDraft = {
  title: '', leaveAlone: '', saw: '', why: '', howSure: 'fairly_sure', oneChange: '', drillTitle: '', drillSteps: '', drillDose: '', caution: '',
}

/** A letter written elsewhere meanwhile: one of the two must be chosen, and nothing is sent until then. */
export interface LetterConflict {
  other: DraftView
}

/**
 * The letter a coach writes. It saves itself; what the server does not have yet is kept on this device; a letter changed
 * elsewhere is never overwritten without asking. Wait for `isReady` before drawing.
 * @param canWrite true while the reader has the review in hand; only then there is a draft to ask for
 */
export function useDraft(reviewId: string, canWrite: MaybeRefOrGetter<boolean>) {
  const url = `/api/reviews/${reviewId}/draft`
  const fetchOnServer = useRequestFetch()
  const request = useAsyncData(`draft-${reviewId}`, async () => toValue(canWrite) ? await fetchOnServer<DraftView>(url) : null)
  const { data, error, refresh } = request
  const store = useAnswerDraftStore()

  const letter = ref<LetterDraft>({ ...EMPTY_LETTER })
  const version = ref(0)
  const serverSavedAtMs = ref<number | null>(null)
  const conflict = ref<LetterConflict>()
  const autosave = useAutosave(save)

  const copy = (): LetterDraft => ({ ...toRaw(letter.value) })
  const kept = (): KeptLetter => ({ baseVersion: version.value, letter: copy(), keptAtMs: Date.now() })

  function take(draft: DraftView) {
    letter.value = { ...draft.letter }
    note(draft)
  }

  async function save() {
    const sent = copy()
    try {
      note(await $fetch<DraftView>(url, { method: 'PUT', body: { version: version.value, letter: sent } }))
    }
    catch (failure) {
      if (readErrorAnswer(failure).code !== 'draft-changed-elsewhere' || !await isOwnEcho(sent)) throw failure
    }
    // Typed on while it was sent: the device's copy must now say which version those words stand on.
    if (isSameLetter(sent, letter.value)) store.forget(reviewId)
    else store.keep(reviewId, kept())
  }

  function note(draft: DraftView) {
    version.value = draft.version
    serverSavedAtMs.value = draft.savedAtMs
  }

  /** True when the newer version is this very letter, saved by a try whose answer got lost; else the coach must choose. */
  async function isOwnEcho(sent: LetterDraft): Promise<boolean> {
    const other = await $fetch<DraftView>(url)
    if (isSameLetter(other.letter, sent)) {
      note(other)
      return true
    }
    conflict.value = { other }
    return false
  }

  /** To be called after every change by hand. */
  function touch() {
    store.keep(reviewId, kept())
    if (conflict.value === undefined) autosave.touch()
  }

  /** Puts the words on this sheet over those written elsewhere, as the coach chose. */
  async function keepMine() {
    if (conflict.value === undefined) return
    version.value = conflict.value.other.version
    conflict.value = undefined
    autosave.touch()
    await autosave.flush()
  }

  function takeOther() {
    if (conflict.value === undefined) return
    take(conflict.value.other)
    conflict.value = undefined
    autosave.settle()
    store.forget(reviewId)
  }

  function lookAtKept(server: DraftView) {
    const found = store.find(reviewId)
    const fate = judgeKeptLetter(found, server)
    if (found === undefined) return
    if (fate === 'nothing') store.forget(reviewId)
    if (fate === 'nothing') return
    letter.value = { ...found.letter }
    if (fate === 'restore') autosave.touch()
    else conflict.value = { other: server }
  }

  const isReady = request.then(() => {
    if (data.value) take(data.value)
  })
  onMounted(() => {
    if (data.value) lookAtKept(data.value)
  })
  watch(() => toValue(canWrite), async (can) => {
    if (!can) return
    await refresh()
    if (!data.value) return
    take(data.value)
    lookAtKept(data.value)
  })

  const sending = useDeed()

  /** Sends the letter as it stands; the review as answered, or undefined when it could not go (see `sending.problem`). */
  async function send(): Promise<ReviewView | undefined> {
    if (conflict.value !== undefined || !await autosave.flush()) return undefined
    const answer = await sending.run(headers => $fetch<ReviewView>(`/api/reviews/${reviewId}/answer`, {
      method: 'POST', headers, body: { version: version.value },
    }), String(version.value))
    if (sending.problem.value?.code === 'draft-changed-elsewhere') await isOwnEcho(copy())
    return answer
  }

  return {
    isReady, letter, error, conflict, keepMine, takeOther, touch, flush: autosave.flush, send, sending,
    saveState: autosave.state, saveProblem: autosave.problem,
    keptAtMs: autosave.keptAtMs, savedAtMs: serverSavedAtMs,
  }
}
