import type { ClipFacts, FrameFacts, OpenedClip, PreparedClip, Progress, SpanS } from '~/film/prepare'
import { ClipProblem, explainWay, findClipProblem, forgetPrepared, openClip, prepareClip, readFrameFacts, showFrame, suggestSwings } from '~/film/prepare'
import { encodeBase64 } from './base64'
import { bestOffsets } from './compare'
import { drawFilm } from './draw-film'
import { holdsSamePackets } from './packets'

/** What the page did with a clip, as far as it can cross to the test. */
export interface PreparedOnPage {
  prepared: Omit<PreparedClip, 'file'>
  name: string
  base64: string
  words: string
  progress: Progress[]
}

const harness = {
  /** Facts of a film, or the reason why it is none. */
  async open(path: string): Promise<{ facts: ClipFacts, problem: string | undefined } | { refused: string }> {
    try {
      return await withClip(path, clip => Promise.resolve({ facts: clip.facts, problem: findClipProblem(clip.facts) }))
    }
    catch (error) {
      if (error instanceof ClipProblem) return { refused: error.reason }
      throw error
    }
  },

  /** The prepared film itself, and what was said while it was made. */
  prepare: (path: string, keep: SpanS[]): Promise<PreparedOnPage> => withClip(path, async (clip) => {
    const progress: Progress[] = []
    const { file, ...prepared } = await prepareClip(clip, { keep, onProgress: step => progress.push(step) })
    const base64 = encodeBase64(await file.arrayBuffer())
    await forgetPrepared(prepared)
    return { prepared, name: file.name, base64, words: explainWay(prepared), progress }
  }),

  /** Prepares a film, and then what came out once more. */
  prepareTwice: (path: string, keep: SpanS[], keepThen: SpanS[]) => withClip(path, async (clip) => {
    const { file, ...first } = await prepareClip(clip, { keep })
    const again = await openClip(file)
    const { file: fileThen, ...second } = await prepareClip(again, { keep: keepThen })
    const isSameBytes = await holdsSamePackets(file, fileThen, second.spans)
    again.close()
    await Promise.all([forgetPrepared(first), forgetPrepared(second)])
    return { first, second, isSameBytes }
  }),

  /** Prepares a film drawn for it, and gives the size of what came out. */
  async prepareDrawn(widthPx: number, heightPx: number, frameCount: number) {
    const clip = await openClip(await drawFilm(widthPx, heightPx, frameCount))
    const { file, ...prepared } = await prepareClip(clip, { keep: [] })
    clip.close()
    const made = await openClip(file)
    made.close()
    await forgetPrepared(prepared)
    return { ...prepared, size: [made.facts.widthPx, made.facts.heightPx] }
  },

  /** The reason why preparing was refused. */
  refuse: (path: string, keep: SpanS[]): Promise<string | undefined> => withClip(path, async (clip) => {
    try {
      await prepareClip(clip, { keep })
      return undefined
    }
    catch (error) {
      return error instanceof ClipProblem ? error.reason : String(error)
    }
  }),

  /** Told to stop once so many frames are done. */
  stop: (path: string, keep: SpanS[], afterFrames: number): Promise<{ thrown: string, doneFrames: number, totalFrames: number, leftOnDevice: string[] }> => withClip(path, async (clip) => {
    const stopping = new AbortController()
    let last: Progress = { done: 0, total: 0 }
    const onProgress = (step: Progress) => {
      last = step
      if (step.done >= afterFrames) stopping.abort()
    }
    const thrown = await prepareClip(clip, { keep, onProgress, signal: stopping.signal }).then(() => 'nothing', (error: unknown) => error instanceof DOMException ? error.name : String(error))
    return { thrown, doneFrames: last.done, totalFrames: last.total, leftOnDevice: await listOnDevice() }
  }),

  /** For each kept frame, which frame of the original it looks most like: 0 is its own, -1 the one before. */
  compare: (path: string, keep: SpanS[]): Promise<number[]> => withClip(path, async (clip) => {
    const prepared = await prepareClip(clip, { keep })
    const after = await openClip(prepared.file)
    const originals = prepared.spans.flatMap(({ fromFrame, toFrame }) => Array.from({ length: toFrame - fromFrame }, (_, index) => fromFrame + index))
    const offsets = await bestOffsets(clip, after, originals)
    after.close()
    await forgetPrepared(prepared)
    return offsets
  }),

  /** Draws a frame on the page's canvas and gives its time and size. */
  show: (path: string, timeS: number): Promise<{ shownS: number | undefined, widthPx: number, heightPx: number, corners: number[][] }> => withClip(path, async (clip) => {
    const canvas = canvasOf('shown')
    const shownS = await showFrame(clip, timeS, canvas)
    const { width, height } = canvas
    const context = new OffscreenCanvas(width, height).getContext('2d', { willReadFrequently: true })
    context?.drawImage(canvas, 0, 0)
    const corners = [[0.1, 0.1], [0.9, 0.1], [0.1, 0.9], [0.9, 0.9]].map(([x = 0, y = 0]) => [...context?.getImageData(Math.floor(x * width), Math.floor(y * height), 1, 1).data.slice(0, 3) ?? []])
    return { shownS, widthPx: width, heightPx: height, corners }
  }),

  /** Asks for many frames at once, as a hand on a slider does, and says which were drawn. */
  scrub: (path: string, timesS: number[]): Promise<(number | undefined)[]> => withClip(path, clip =>
    Promise.all(timesS.map(timeS => showFrame(clip, timeS, canvasOf('shown'))))),

  look: (path: string): Promise<FrameFacts> => withClip(path, readFrameFacts),

  suggest: (path: string): Promise<SpanS[]> => withClip(path, clip => suggestSwings(clip)),

  listOnDevice,
}

async function withClip<T>(path: string, act: (clip: OpenedClip) => Promise<T>): Promise<T> {
  const answer = await fetch(path)
  if (!answer.ok) throw new Error(`${path}: ${answer.status}`)
  const clip = await openClip(new File([await answer.blob()], path.split('/').at(-1) ?? 'film'))
  try {
    return await act(clip)
  }
  finally {
    clip.close()
  }
}

/** Every file of this origin's private storage. */
async function listOnDevice(): Promise<string[]> {
  const names: string[] = []
  const walk = async (folder: FileSystemDirectoryHandle, path: string) => {
    for await (const [name, handle] of folder.entries()) {
      if (handle instanceof FileSystemDirectoryHandle) await walk(handle, `${path}${name}/`)
      else names.push(`${path}${name}`)
    }
  }
  await walk(await navigator.storage.getDirectory(), '')
  return names
}

function canvasOf(id: string): HTMLCanvasElement {
  const canvas = document.getElementById(id)
  if (!(canvas instanceof HTMLCanvasElement)) throw new Error(`The page has no canvas ${id}.`)
  return canvas
}

declare global {
  var prepareHarness: typeof harness
}

globalThis.prepareHarness = harness
