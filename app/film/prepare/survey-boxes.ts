import type { BoxPlace, BoxTrack, BoxWalk } from './walk-boxes'
import { readType, walkBoxes } from './walk-boxes'

export interface BoxSurvey {
  hasLocation: boolean
  hasSound: boolean
  /** Names of tags that tell of the phone. */
  deviceTags: string[]
  /** Half-open, in ticks of the picture track; frames outside are in the file but never shown. Undefined: all are shown. */
  shown: { startTick: number, endTick: number } | undefined
}

/** Read whole; everything else at the top level holds frames or nothing. */
const TAKEN = ['moov', 'meta', 'udta', 'uuid']
const TAKEN_MAX_BYTES = 16 * 1024 * 1024
/** A fragmented film has two boxes a fragment. */
const BOX_MAX_COUNT = 2000

/**
 * Goes over the boxes of an MP4 or MOV for what the library does not tell: places and devices, and where the shown part
 * ends. Never fails: what cannot be read is not told, and the server looks again before it takes anything.
 */
export async function surveyBoxes(file: Blob): Promise<BoxSurvey> {
  const walk: BoxWalk = { tracks: [], deviceTags: new Set(), hasLocation: false, movieTimescale: 0 }
  try {
    let at = 0
    for (let count = 0; at + 8 <= file.size && count < BOX_MAX_COUNT; count++) {
      const { type, bytes } = await readHeader(file, at)
      if (TAKEN.includes(type) && bytes <= TAKEN_MAX_BYTES)
        walkBoxes(walk, place(await file.slice(at, at + bytes).arrayBuffer()))
      at += bytes
    }
  }
  catch (error) {
    if (!(error instanceof RangeError)) throw error
  }
  return {
    hasLocation: walk.hasLocation,
    hasSound: walk.tracks.some(track => track.handler === 'soun'),
    deviceTags: [...walk.deviceTags].sort(),
    shown: findShown(walk.movieTimescale, walk.tracks.find(track => track.handler === 'vide')),
  }
}

async function readHeader(file: Blob, at: number): Promise<{ type: string, bytes: number }> {
  const view = new DataView(await file.slice(at, at + 16).arrayBuffer())
  const short = view.getUint32(0)
  const bytes = short === 0 ? file.size - at : short === 1 ? Number(view.getBigUint64(8)) : short
  if (bytes < 8) throw new RangeError('A box shorter than its header.')
  return { type: readType(view, 4), bytes }
}

function place(bytes: ArrayBuffer): BoxPlace {
  return { view: new DataView(bytes), parent: '', from: 0, to: bytes.byteLength, track: undefined, depth: 0 }
}

/** ISO/IEC 14496-12, 8.6.6: leading empty edits delay the film, then one edit shows a stretch; a length of 0 means to the end. */
function findShown(movieTimescale: number, track: BoxTrack | undefined): BoxSurvey['shown'] {
  const first = track?.edits.findIndex(edit => edit.startTick !== -1) ?? -1
  const edit = track?.edits[first]
  if (!track || !edit || movieTimescale === 0) return undefined
  const toTicks = (movieTicks: number) => movieTicks / movieTimescale * track.timescale
  const delay = track.edits.slice(0, first).reduce((sum, empty) => sum + empty.lengthInMovieTicks, 0)
  return {
    startTick: Math.round(toTicks(delay)),
    endTick: edit.lengthInMovieTicks === 0 ? Infinity : toTicks(delay + edit.lengthInMovieTicks),
  }
}
