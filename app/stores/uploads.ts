import { computed, ref, watch } from 'vue'
import { defineStore } from 'pinia'
import type { ClipBrief, ClipUpload, ClipView, PartsAnswer, PreparedAs } from '#shared/types/reviews'
import { findFilmContentType } from '~/film/upload/content-type'
import { putPart } from '~/film/upload/put-part'
import { explainFailure, NotFilm, readFailure, type FailureWords } from '~/film/upload/explain'
import { holdPage } from '~/film/upload/hold-page'
import { keepTrying } from '~/film/upload/keep-trying'
import { sendParts, type SendPlan } from '~/film/upload/send-parts'
import { waitForNextTry } from '~/film/upload/wait'

/** `starting`: asking for addresses; `reading`: all bytes are there and the server reads them; the last two are ends. */
export type UploadPhase = 'starting' | 'sending' | 'reading' | 'done' | 'failed'

/** One file on its way to the store. */
export interface ClipOnItsWay {
  reviewId: string
  view: ClipView
  fileName: string
  bytes: number
  sentBytes: number
  phase: UploadPhase
  /** Undefined until the server knows the clip. */
  clip: ClipBrief | undefined
  /** When failed. */
  problem: FailureWords | undefined
}

/** What preparing a file took out of it, told beside it. */
export type ToldOfClip = Partial<Record<'captureFramesPerSecond', number> & Record<'preparedAs', PreparedAs>>

/** Films being sent. They outlive the page they were chosen on: the person may read on elsewhere meanwhile. */
export const useUploadsStore = defineStore('uploads', () => {
  const bySlot = ref<Record<string, ClipOnItsWay>>({})
  // Files and controllers are no state that could be drawn or carried from the server, so they stay outside it.
  const files = new Map<string, File>()
  const told = new Map<string, ToldOfClip>()
  const controllers = new Map<string, AbortController>()

  const isSending = computed(() => Object.values(bySlot.value).some(isUnderWay))
  watch(isSending, holdPage)

  const slotOf = (reviewId: string, view: ClipView) => `${reviewId}:${view}`
  const find = (reviewId: string, view: ClipView) => bySlot.value[slotOf(reviewId, view)]

  function put(slot: string, change: Partial<ClipOnItsWay>) {
    const before = bySlot.value[slot]
    if (before !== undefined) bySlot.value[slot] = { ...before, ...change }
  }

  /** Sends a newly chosen file as the clip of this view. */
  async function send(reviewId: string, view: ClipView, file: File, about: ToldOfClip = {}): Promise<void> {
    told.set(slotOf(reviewId, view), about)
    await run(reviewId, view, file, undefined, async (slot, signal) => {
      const contentType = findFilmContentType(file.name, file.type)
      if (contentType === undefined) throw new NotFilm()
      const body = { view, fileName: file.name, bytes: file.size, contentType, ...about }
      const answer = await patiently(headers => $fetch<ClipUpload>(`/api/reviews/${reviewId}/clips`, { method: 'POST', headers, body }), signal)
      put(slot, { clip: answer.clip })
      return { clipId: answer.clip.id, plan: { fileBytes: file.size, partBytes: answer.partBytes, parts: answer.parts, doneNumbers: [] } }
    })
  }

  /** Goes on with a clip that was begun before, from what the store has; `file` must be the same one. */
  async function goOn(reviewId: string, clip: ClipBrief, file: File): Promise<void> {
    await run(reviewId, clip.view, file, clip, async (_slot, signal) => {
      // Asked for only here: the schemas weigh more than the rest of the page.
      const { PART_BYTES } = await import('#shared/schemas/clips')
      const answer = await patiently(headers => askParts(clip.id, [], headers), signal)
      return { clipId: clip.id, plan: { fileBytes: file.size, partBytes: PART_BYTES, parts: answer.parts, doneNumbers: answer.done } }
    })
  }

  /** Takes up again what failed on the way, without choosing the file anew. */
  async function tryAgain(reviewId: string, view: ClipView): Promise<void> {
    const file = files.get(slotOf(reviewId, view))
    const clip = find(reviewId, view)?.clip
    if (file === undefined) return
    if (clip === undefined) await send(reviewId, view, file, told.get(slotOf(reviewId, view)))
    else await goOn(reviewId, clip, file)
  }

  async function run(
    reviewId: string,
    view: ClipView,
    file: File,
    clip: ClipBrief | undefined,
    begin: (slot: string, signal: AbortSignal) => Promise<{ clipId: string, plan: SendPlan }>,
  ): Promise<void> {
    const slot = slotOf(reviewId, view)
    controllers.get(slot)?.abort()
    const controller = new AbortController()
    controllers.set(slot, controller)
    files.set(slot, file)
    bySlot.value[slot] = { reviewId, view, fileName: file.name, bytes: file.size, sentBytes: 0, phase: 'starting', clip, problem: undefined }
    try {
      const { clipId, plan } = await begin(slot, controller.signal)
      controller.signal.throwIfAborted()
      put(slot, { phase: 'sending' })
      await sendParts(plan, {
        putPart: (url, range, onSentBytes, signal) => putPart(file, url, range, onSentBytes, signal),
        askParts: numbers => patiently(headers => askParts(clipId, numbers, headers), controller.signal),
        ...patience,
      }, sentBytes => put(slot, { sentBytes }), controller.signal)
      put(slot, { phase: 'reading', sentBytes: file.size })
      const read = await patiently(headers => completeClip(clipId, headers), controller.signal)
      controller.signal.throwIfAborted()
      files.delete(slot)
      put(slot, { phase: 'done', clip: read })
    }
    catch (error) {
      if (!controller.signal.aborted) put(slot, { phase: 'failed', problem: explainFailure(error) })
    }
  }

  /** Stops sending and forgets the file; what the server has is for `removeClip`. */
  function stop(reviewId: string, view: ClipView) {
    const slot = slotOf(reviewId, view)
    controllers.get(slot)?.abort()
    controllers.delete(slot)
    files.delete(slot)
    bySlot.value = Object.fromEntries(Object.entries(bySlot.value).filter(([key]) => key !== slot))
  }

  return { bySlot, isSending, find, send, goOn, tryAgain, stop }
})

/** True while bytes still have to leave this device or be read. */
export function isUnderWay(clip: ClipOnItsWay): boolean {
  return clip.phase !== 'done' && clip.phase !== 'failed'
}

/** A type, not an interface: only types count as the plain records that headers are. */
type KeyHeader = { 'Idempotency-Key': string }

const patience = { wait: waitForNextTry, random: () => Math.random() }

/** Repeats under one key while no definite answer comes, so that a tunnel does not end an upload. */
async function patiently<T>(act: (headers: KeyHeader) => Promise<T>, signal: AbortSignal): Promise<T> {
  const headers = { 'Idempotency-Key': crypto.randomUUID() }
  return await keepTrying(() => act(headers), readFailure, patience, signal)
}

async function askParts(clipId: string, numbers: number[], headers: KeyHeader): Promise<PartsAnswer> {
  return await $fetch<PartsAnswer>(`/api/clips/${clipId}/parts`, { method: 'POST', headers, body: { numbers } })
}

async function completeClip(clipId: string, headers: KeyHeader): Promise<ClipBrief> {
  return await $fetch<ClipBrief>(`/api/clips/${clipId}/complete`, { method: 'POST', headers, body: {} })
}
