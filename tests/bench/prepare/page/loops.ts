import type { OpenedClip, SpanS } from '~/film/prepare'
import { forgetPrepared, openClip, prepareClip } from '~/film/prepare'
import { bareLoop, readBareFilm } from './bare-loop'

/** One of the demo's clips, and the swings kept of it, which do not begin at key frames: it must be decoded and encoded. */
export interface Work {
  path: string
  keep: SpanS[]
}

/** Frames a second of each way over the same frames. */
export interface Rates {
  prepared: number
  bare: number
  frames: number
  way: string
}

/** Both ways once, one right after the other; which goes first is for the caller to change about. */
async function measure({ path, keep }: Work, isBareFirst: boolean): Promise<Rates> {
  const file = new File([await (await fetch(path)).blob()], 'clip.mp4')
  const clip = await openClip(file)
  const codecString = await findCodecString(clip, keep)
  const bareFilm = await readBareFilm(file, clip, keep, codecString)
  const prepare = async () => {
    const startMs = performance.now()
    const prepared = await prepareClip(clip, { keep })
    const seconds = (performance.now() - startMs) / 1000
    await forgetPrepared(prepared)
    return { rate: prepared.frames / seconds, frames: prepared.frames, way: prepared.way }
  }
  const bare = async () => {
    const startMs = performance.now()
    const frames = await bareLoop(bareFilm)
    return { rate: frames / ((performance.now() - startMs) / 1000), frames }
  }
  const first = isBareFirst ? await bare() : undefined
  const ours = await prepare()
  const theirs = first ?? await bare()
  clip.close()
  if (theirs.frames !== ours.frames) throw new Error(`The bare loop made ${theirs.frames} frames of ${ours.frames}.`)
  return { prepared: ours.rate, bare: theirs.rate, frames: ours.frames, way: ours.way }
}

/** What the prepared film is encoded as, so that the bare loop asks the same of the same encoder. */
async function findCodecString(clip: OpenedClip, [[fromS] = [0, 0]]: SpanS[]): Promise<string> {
  const prepared = await prepareClip(clip, { keep: [[fromS, fromS + 0.1]] })
  const made = await openClip(prepared.file)
  made.close()
  await forgetPrepared(prepared)
  return made.facts.codecString
}

declare global {
  var measurePreparing: typeof measure
}

globalThis.measurePreparing = measure
