import type { SwingInput } from '#shared/schemas/swings'
import { CONTACTS, FLIGHT_CURVES, FLIGHT_HEIGHTS, FLIGHT_STARTS, SURFACES } from '#shared/domain/review/ball-results'
import type { ClipView } from '#shared/types/reviews'

/*
 * What was said of swings whose clip is still on its way lies in this browser. Refused by a private window, it is only in
 * memory; nothing that is read back is trusted.
 */

const keyOf = (reviewId: string, view: ClipView) => `turfnote-swings-${reviewId}-${view}`

export function keepSwings(reviewId: string, view: ClipView, swings: readonly SwingInput[]): void {
  try {
    localStorage.setItem(keyOf(reviewId, view), JSON.stringify(swings))
  }
  catch {
    // In memory, then.
  }
}

/** Undefined when nothing waits for this view, or what is there cannot be read. */
export function findKeptSwings(reviewId: string, view: ClipView): SwingInput[] | undefined {
  try {
    return readSwings(JSON.parse(localStorage.getItem(keyOf(reviewId, view)) ?? 'null'))
  }
  catch {
    return undefined
  }
}

export function forgetSwings(reviewId: string, view: ClipView): void {
  try {
    localStorage.removeItem(keyOf(reviewId, view))
  }
  catch {
    // Nothing was kept.
  }
}

/** Swings out of what a browser gave back; undefined when it is not a list of them. */
export function readSwings(value: unknown): SwingInput[] | undefined {
  if (!Array.isArray(value)) return undefined
  const swings = value.map(readSwing).filter(swing => swing !== undefined)
  return swings.length === 0 || swings.length < value.length ? undefined : swings
}

function readSwing(value: unknown): SwingInput | undefined {
  const fromMs = read(value, 'fromMs')
  const toMs = read(value, 'toMs')
  if (typeof fromMs !== 'number' || typeof toMs !== 'number') return undefined
  const carryM = read(value, 'carryM')
  const flight = read(value, 'flight')
  const start = FLIGHT_STARTS.find(one => one === read(flight, 'start'))
  const curve = FLIGHT_CURVES.find(one => one === read(flight, 'curve'))
  const height = FLIGHT_HEIGHTS.find(one => one === read(flight, 'height'))
  return {
    fromMs,
    toMs,
    contact: CONTACTS.find(one => one === read(value, 'contact')) ?? null,
    flight: start !== undefined && curve !== undefined && height !== undefined ? { start, curve, height } : null,
    carryM: typeof carryM === 'number' ? carryM : null,
    surface: SURFACES.find(one => one === read(value, 'surface')) ?? null,
  }
}

function read(value: unknown, key: string): unknown {
  return typeof value === 'object' && value !== null ? Reflect.get(value, key) : undefined
}
