import { holdsLocation, tellsDevice, tellsLocation, tracksLocation } from './telling-names'

export interface BoxTrack {
  handler: string
  timescale: number
  edits: { lengthInMovieTicks: number, startTick: number }[]
}

/** What is gathered over all boxes of one film. */
export interface BoxWalk {
  tracks: BoxTrack[]
  deviceTags: Set<string>
  hasLocation: boolean
  movieTimescale: number
}

/** A stretch of a piece of the file in memory that is filled with boxes. */
export interface BoxPlace {
  view: DataView
  /** Name of the box around. */
  parent: string
  from: number
  to: number
  track: BoxTrack | undefined
  depth: number
}

interface Box {
  type: string
  body: number
  end: number
}

const CONTAINERS = ['moov', 'mdia', 'minf', 'stbl', 'edts', 'udta', 'ilst']
const NESTING_MAX = 12

/** Walks boxes side by side (ISO/IEC 14496-12, 4.2) and into those that hold more. Stops at the first that does not fit. */
export function walkBoxes(walk: BoxWalk, place: BoxPlace): void {
  let at = place.from
  while (place.to - at >= 8 && place.depth <= NESTING_MAX) {
    const short = place.view.getUint32(at)
    const size = short === 1 ? Number(place.view.getBigUint64(at + 8)) : short === 0 ? place.to - at : short
    const body = at + (short === 1 ? 16 : 8)
    if (size < body - at || size > place.to - at) return
    visit(walk, place, { type: readType(place.view, at + 4), body, end: at + size })
    at += size
  }
}

/** Four letters as Latin-1, since QuickTime's begin with ©. */
export function readType(view: DataView, at: number): string {
  return String.fromCharCode(view.getUint8(at), view.getUint8(at + 1), view.getUint8(at + 2), view.getUint8(at + 3))
}

function visit(walk: BoxWalk, place: BoxPlace, box: Box): void {
  const { view, track } = place
  if (place.parent === 'udta' || place.parent === 'ilst') noteTag(walk, view, box)
  if (CONTAINERS.includes(box.type)) return walkBoxes(walk, inside(place, box))
  switch (box.type) {
    case 'trak': {
      const next: BoxTrack = { handler: '', timescale: 0, edits: [] }
      walk.tracks.push(next)
      return walkBoxes(walk, { ...inside(place, box), track: next })
    }
    case 'meta':
      // ISO's begins with version and flags, QuickTime's at once with its first box, whose size is not zero.
      return walkBoxes(walk, { ...inside(place, box), from: box.body + (view.getUint32(box.body) === 0 ? 4 : 0) })
    case 'mvhd':
      walk.movieTimescale = view.getUint32(box.body + (view.getUint8(box.body) === 1 ? 20 : 12))
      return
    case 'mdhd':
      if (track) track.timescale = view.getUint32(box.body + (view.getUint8(box.body) === 1 ? 20 : 12))
      return
    case 'hdlr':
      // A second one inside `minf` names QuickTime's data handler, not the kind of the track.
      if (track?.handler === '') track.handler = readType(view, box.body + 8)
      return
    case 'elst':
      track?.edits.push(...readEdits(view, box))
      return
    case 'keys':
      for (const name of readKeys(view, box)) noteName(walk, name)
      return
    case 'stsd':
      if (track && track.handler !== 'vide' && track.handler !== 'soun' && tracksLocation(readType(view, box.body + 12), latin1(view, box)))
        walk.hasLocation = true
      return
    case 'uuid':
      if (holdsLocation(latin1(view, box))) walk.hasLocation = true
  }
}

function inside(place: BoxPlace, box: Box): BoxPlace {
  return { ...place, parent: box.type, from: box.body, to: box.end, depth: place.depth + 1 }
}

function noteTag(walk: BoxWalk, view: DataView, box: Box): void {
  noteName(walk, box.type)
  if (holdsLocation(latin1(view, box))) walk.hasLocation = true
}

function noteName(walk: BoxWalk, name: string): void {
  if (tellsLocation(name)) walk.hasLocation = true
  if (tellsDevice(name)) walk.deviceTags.add(name)
}

function readEdits(view: DataView, box: Box): BoxTrack['edits'] {
  const isLong = view.getUint8(box.body) === 1
  const bytes = isLong ? 20 : 12
  const count = Math.min(view.getUint32(box.body + 4), Math.floor((box.end - box.body - 8) / bytes))
  return Array.from({ length: count }, (_, index) => {
    const at = box.body + 8 + index * bytes
    return isLong
      ? { lengthInMovieTicks: Number(view.getBigUint64(at)), startTick: Number(view.getBigInt64(at + 8)) }
      : { lengthInMovieTicks: view.getUint32(at), startTick: view.getInt32(at + 4) }
  })
}

/** Each key is laid out as a box whose name is its namespace and whose body is its text. */
function readKeys(view: DataView, box: Box): string[] {
  const names: string[] = []
  for (let at = box.body + 8; box.end - at >= 8;) {
    const size = view.getUint32(at)
    if (size < 8 || size > box.end - at) break
    names.push(latin1(view, { type: '', body: at + 8, end: at + size }))
    at += size
  }
  return names
}

function latin1(view: DataView, box: Box): string {
  return new TextDecoder('latin1').decode(new Uint8Array(view.buffer, view.byteOffset + box.body, box.end - box.body))
}
