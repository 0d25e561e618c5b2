import type { MaybeRefOrGetter } from 'vue'
import type { ClipBrief, ClipView, ReviewView } from '#shared/types/reviews'
import { readErrorAnswer } from '~/utils/errors'

const READING_POLL_MS = 3_000
const VIEWS = ['face_on', 'down_the_line'] as const satisfies readonly ClipView[]

/** The clips of a draft: those the server has, and those on their way. */
export function useClips(reviewId: MaybeRefOrGetter<string | undefined>, known: ClipBrief[]) {
  const store = useUploadsStore()
  const { bySlot } = storeToRefs(store)
  const fromServer = ref<ClipBrief[]>(known)
  const problem = ref<string>()

  const uploadOf = (view: ClipView) => {
    const id = toValue(reviewId)
    return id === undefined ? undefined : bySlot.value[`${id}:${view}`]
  }

  /** The newest clip of a view; what this device has just heard is newer than what the page was loaded with. */
  const clipOf = (view: ClipView): ClipBrief | undefined => {
    const upload = uploadOf(view)
    if (upload?.phase === 'done' && upload.clip !== undefined) {
      const { id } = upload.clip
      return fromServer.value.find(clip => clip.id === id && clip.state !== 'uploading') ?? upload.clip
    }
    return fromServer.value.filter(clip => clip.view === view).reduce<ClipBrief | undefined>(
      (newest, clip) => newest === undefined || clip.createdAtMs > newest.createdAtMs ? clip : newest, undefined)
  }

  const statesOf = () => VIEWS.flatMap(view => clipOf(view)?.state ?? [])
  const acceptedCount = computed(() => statesOf().filter(state => state === 'accepted').length)
  const isReading = computed(() => statesOf().includes('reading'))
  /** True while a clip is neither taken nor refused; the review cannot be sent until then. */
  const isUnfinished = computed(() => VIEWS.some((view) => {
    const phase = uploadOf(view)?.phase
    if (phase !== undefined && phase !== 'done') return true
    const state = clipOf(view)?.state
    return state === 'uploading' || state === 'reading'
  }))

  async function refresh() {
    const id = toValue(reviewId)
    if (id === undefined) return
    const review = await $fetch<ReviewView>(`/api/reviews/${id}`)
    fromServer.value = review.clips
  }

  /** Takes what there is of a view away, from the server too; a refused or half-sent clip leaves nothing behind. */
  async function remove(view: ClipView) {
    const id = toValue(reviewId)
    if (id === undefined) return
    problem.value = undefined
    const known = fromServer.value.filter(clip => clip.view === view).map(clip => clip.id)
    const ids = new Set([...known, ...[uploadOf(view)?.clip?.id ?? []].flat()])
    store.stop(id, view)
    try {
      for (const clipId of ids) {
        await $fetch(`/api/clips/${clipId}`, { method: 'DELETE' })
        fromServer.value = fromServer.value.filter(other => other.id !== clipId)
      }
    }
    catch (failure) {
      problem.value = readErrorAnswer(failure).message
    }
  }

  function pause(view: ClipView) {
    const id = toValue(reviewId)
    if (id !== undefined) store.pause(id, view)
  }

  async function resume(view: ClipView) {
    const id = toValue(reviewId)
    if (id !== undefined) await store.resume(id, view)
  }

  // Another window has sent or given up what this one was waiting to send.
  watch(() => store.endedElsewhereCount, () => void refresh().catch(() => undefined))

  let timer: number | undefined
  onMounted(() => {
    void store.goOnWithKept()
    timer = window.setInterval(() => {
      if (isReading.value) void refresh().catch(() => undefined)
    }, READING_POLL_MS)
  })
  onScopeDispose(() => {
    if (import.meta.client) window.clearInterval(timer)
  })

  return { uploadOf, clipOf, acceptedCount, isUnfinished, pause, resume, remove, problem, store }
}
