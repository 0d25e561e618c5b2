import type { ClipView, PreparedAs } from '#shared/types/reviews'
import type { PreparedClip, PrepareWay } from '~/film/prepare'

/** A clip as it leaves this device, and what goes with it. */
export interface MadeClip {
  view: ClipView
  file: File
  preparedAs: PreparedAs
  captureFramesPerSecond: number | undefined
  /** Name on this device's own storage, where it lies there. */
  keptAs: string | undefined
  /** Milliseconds of the file, whole, in order. */
  spans: SpanMs[]
}

export interface SpanMs {
  fromMs: number
  toMs: number
}

const AS: Readonly<Record<PrepareWay, PreparedAs>> = {
  're-encoded': 're_encoded',
  'cut-and-stripped': 'cut',
  'remuxed': 'remuxed',
  'untouched': 'original',
}

/** The way that a clip's record names. */
export function wayOf(preparedAs: PreparedAs): PrepareWay {
  return (['re-encoded', 'cut-and-stripped', 'remuxed', 'untouched'] as const).find(way => AS[way] === preparedAs) ?? 'untouched'
}

/** @param saidFramesPerSecond what the person says it was filmed at, which goes before the file's own tag */
export function madeFrom(view: ClipView, prepared: PreparedClip, saidFramesPerSecond: number | undefined): MadeClip {
  const { file, way, keptAs, swings, captureFramesPerSecond } = prepared
  const spans = swings
    .map(([fromS, toS]) => ({ fromMs: Math.max(0, Math.round(fromS * 1000)), toMs: Math.round(toS * 1000) }))
    .filter(({ fromMs, toMs }) => toMs > fromMs)
  return { view, file, preparedAs: AS[way], captureFramesPerSecond: saidFramesPerSecond ?? captureFramesPerSecond, keptAs, spans }
}
