import type { MaybeRefOrGetter } from 'vue'
import type { ClipBrief, ClipView, ReviewView } from '#shared/types/reviews'
import { readErrorAnswer } from '~/utils/errors'

const READING_POLL_MS = 3_000

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
    if (upload?.phase === 'done' && upload.clip !== undefined) return upload.clip
    return fromServer.value.filter(clip => clip.view === view).reduce<ClipBrief | undefined>(
      (newest, clip) => newest === undefined || clip.createdAtMs > newest.createdAtMs ? clip : newest, undefined)
  }

  const accepted = computed(() => (['face_on', 'down_the_line'] as const).filter(view => clipOf(view)?.state === 'accepted'))
  const isUnderWay = computed(() => (['face_on', 'down_the_line'] as const).some((view) => {
    const phase = uploadOf(view)?.phase
    return phase === 'starting' || phase === 'sending' || phase === 'reading'
  }))

  async function refresh() {
    const id = toValue(reviewId)
    if (id === undefined) return
    const review = await $fetch<ReviewView>(`/api/reviews/${id}`)
    fromServer.value = review.clips
  }

  /** Takes a clip away, from the server too; a refused or half-sent one leaves nothing behind. */
  async function remove(view: ClipView) {
    const id = toValue(reviewId)
    if (id === undefined) return
    problem.value = undefined
    const clip = uploadOf(view)?.clip ?? clipOf(view)
    store.stop(id, view)
    if (clip === undefined) return
    try {
      await $fetch(`/api/clips/${clip.id}`, { method: 'DELETE' })
      fromServer.value = fromServer.value.filter(other => other.id !== clip.id)
    }
    catch (failure) {
      problem.value = readErrorAnswer(failure).message
    }
  }

  let timer: number | undefined
  onMounted(() => {
    timer = window.setInterval(() => {
      if (fromServer.value.some(clip => clip.state === 'reading')) void refresh().catch(() => undefined)
    }, READING_POLL_MS)
  })
  onScopeDispose(() => {
    if (import.meta.client) window.clearInterval(timer)
  })

  return { uploadOf, clipOf, accepted, isUnderWay, refresh, remove, problem, store }
}
