import { ref, watch } from 'vue'
import { defineStore } from 'pinia'
import type { ClipBrief, ClipView, UploadPart } from '#shared/types/reviews'
import { findFilmContentType } from '~/film/upload/content-type'
import { explainFailure, NotFilm } from '~/film/upload/explain'
import { holdPage } from '~/film/upload/hold-page'
import { openKeeper } from '~/film/upload/keep/film-keeper'
import { listWaitingFilms, noteClip } from '~/film/upload/keep/keep-clip'
import { updateKept } from '~/film/upload/keep/ledger'
import { isLostWithPage, newOnItsWay, type ClipOnItsWay } from '~/film/upload/on-its-way'
import { EndedElsewhere, sendFilm, type FilmPorts } from '~/film/upload/send-film'
import { waitForNextTry } from '~/film/upload/wait'
import { Works, type ToldOfClip, type Work } from '~/film/upload/works'

/** Films being sent. They outlive the page they were chosen on and, with a copy on the device, the visit too. */
export const useUploadsStore = defineStore('uploads', () => {
  const { viewer } = useViewer()
  const api = useUploadApi()
  const bySlot = ref<Record<string, ClipOnItsWay>>({})
  /** Grows when another tab has ended a clip that this one was waiting to send: what is known of it is old then. */
  const endedElsewhereCount = ref(0)
  // Files, workers and controllers are no state that could be drawn or carried from the server, so they stay outside it.
  const works = new Works()

  watch(() => Object.values(bySlot.value).some(isLostWithPage), holdPage)

  const slotOf = (reviewId: string, view: ClipView) => `${reviewId}:${view}`

  function put(slot: string, change: Partial<ClipOnItsWay>) {
    const before = bySlot.value[slot]
    if (before !== undefined) bySlot.value[slot] = { ...before, ...change }
  }

  /** Sends a newly chosen file as the clip of this view. */
  async function send(reviewId: string, view: ClipView, file: File, told: ToldOfClip = {}): Promise<void> {
    await run(start(newOnItsWay(reviewId, view, { fileName: file.name, bytes: file.size }), { file, told }))
  }

  /** Goes on with a clip that was begun before and does not lie on this device whole; `file` must be the same one. */
  async function goOn(reviewId: string, clip: ClipBrief, file: File): Promise<void> {
    await run(start({ ...newOnItsWay(reviewId, clip.view, clip), clip }, { file }))
  }

  /** Goes on by itself with what was on its way when a page was closed or loaded anew. Harmless when called again. */
  async function goOnWithKept(): Promise<void> {
    if (viewer.value === null) return
    for (const film of await listWaitingFilms(viewer.value.id, Date.now())) {
      const { reviewId, clip } = film
      if ((bySlot.value[slotOf(reviewId, clip.view)]?.phase ?? 'failed') !== 'failed') continue
      const sentBytes = Math.min(film.doneNumbers.length * film.partBytes, clip.bytes)
      const slot = start({ ...newOnItsWay(reviewId, clip.view, clip), clip, sentBytes, isKept: true }, { film })
      if (film.isPaused) put(slot, { phase: 'paused' })
      else void run(slot)
    }
  }

  /** Takes up again what failed on the way or was told to wait, without choosing the file anew. */
  async function resume(reviewId: string, view: ClipView): Promise<void> {
    const slot = slotOf(reviewId, view)
    noteIsPaused(slot, false)
    await run(slot)
  }

  /** Lets a clip wait until the person says go on, over reloads too. Parts on their way are cut off and sent again then. */
  function pause(reviewId: string, view: ClipView) {
    const slot = slotOf(reviewId, view)
    works.halt(slot)
    noteIsPaused(slot, true)
    put(slot, { phase: 'paused', isWaiting: false })
  }

  /** Stops sending and forgets the file and its copy; what the server has is for whoever gives the clip up. */
  const stop = (reviewId: string, view: ClipView) => drop(slotOf(reviewId, view))
  function drop(slot: string) {
    works.end(slot)
    bySlot.value = Object.fromEntries(Object.entries(bySlot.value).filter(([key]) => key !== slot))
  }

  function start(clip: ClipOnItsWay, what: Partial<Pick<Work, 'file' | 'film' | 'told'>>): string {
    const slot = slotOf(clip.reviewId, clip.view)
    works.open(slot, what)
    bySlot.value[slot] = clip
    return slot
  }

  async function run(slot: string): Promise<void> {
    put(slot, { phase: 'starting', problem: undefined, isWaiting: false })
    await works.restart(slot, async (work, signal) => {
      try {
        const parts = work.film === undefined ? await begin(slot, work, signal) : undefined
        if (work.film === undefined) return
        work.keeper ??= openKeeper({ ...work.film, file: work.file, onWhole: () => put(slot, { isKept: true }) })
        const clip = await sendFilm({ film: work.film, keeper: work.keeper, parts }, portsOf(slot), signal)
        if (signal.aborted) return
        works.end(slot)
        put(slot, { phase: 'done', clip, isWaiting: false })
      }
      catch (error) {
        if (!signal.aborted) fail(slot, error)
      }
    })
  }

  /** Has the server open the clip: the same one once more when it was asked before and its answer got lost. */
  async function begin(slot: string, work: Work, signal: AbortSignal): Promise<UploadPart[] | undefined> {
    const there = bySlot.value[slot]
    const contentType = findFilmContentType(work.file?.name ?? '', work.file?.type ?? '')
    if (there === undefined || contentType === undefined) throw new NotFilm()
    const { reviewId, view, fileName, bytes } = there
    const about = { reviewId, viewerId: viewer.value?.id ?? '' }
    if (there.clip !== undefined) {
      // Asked for only here: the schemas weigh more than the rest of the page.
      const { PART_BYTES } = await import('#shared/schemas/clips')
      work.film = await noteClip({ ...about, clip: there.clip, partBytes: PART_BYTES }, Date.now())
      return undefined
    }
    const { clip, partBytes, parts } = await api.begin(reviewId, { view, fileName, bytes, contentType, ...work.told }, work.key, askingOf(slot, signal))
    work.film = await noteClip({ ...about, clip, partBytes }, Date.now())
    put(slot, { clip })
    return parts
  }

  function noteIsPaused(slot: string, isPaused: boolean) {
    const film = works.find(slot)?.film
    if (film !== undefined) void updateKept(film.clipId, { isPaused }).catch(() => undefined)
  }

  function fail(slot: string, error: unknown) {
    if (error instanceof EndedElsewhere) {
      endedElsewhereCount.value += 1
      return drop(slot)
    }
    const problem = explainFailure(error)
    put(slot, { phase: 'failed', problem, isWaiting: false })
    if (!problem.canGoOn) works.end(slot)
  }

  const askingOf = (slot: string, signal: AbortSignal) => ({ signal, onWait: (isWaiting: boolean) => put(slot, { isWaiting }) })
  const portsOf = (slot: string): FilmPorts => ({
    askParts: (clipId, numbers, signal) => api.askParts(clipId, numbers, askingOf(slot, signal)),
    complete: (clipId, signal) => api.complete(clipId, askingOf(slot, signal)),
    wait: waitForNextTry,
    random: () => Math.random(),
    onElsewhere: () => put(slot, { phase: 'elsewhere' }),
    onProgress: ({ sentBytes, isWaiting }) => put(slot, { phase: 'sending', sentBytes, isWaiting }),
    onArrived: () => put(slot, { phase: 'reading', isWaiting: false }),
  })

  return { bySlot, endedElsewhereCount, send, goOn, goOnWithKept, resume, pause, stop }
})
