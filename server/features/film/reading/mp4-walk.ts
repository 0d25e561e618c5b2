import type { Box, BoxBudget } from './mp4-boxes'
import type { TrackTables } from './mp4-tables'
import type { Traces } from './traces'
import { boxesWithin, NESTING_MAX, readType, readUint64, requireBody } from './mp4-boxes'
import { checkAgreement, countRun, limitFrames, TABLE_CHECKS } from './mp4-tables'
import { UnsoundFilm } from './reading.errors'

/** One entry of an edit list; its length counts in the movie's timescale, its start in the track's. */
interface Edit {
  lengthInMovieTicks: number
  startTicks: number
  isAtNormalRate: boolean
}

export interface WalkedTrack extends TrackTables {
  edits: Edit[]
}

/** What is gathered over all boxes of one film. */
export interface Walk {
  fileBytes: number
  budget: BoxBudget
  traces: Traces
  tracks: WalkedTrack[]
  movieTimescale: number
  /** Frames in fragments, of all tracks. */
  runFrameCount: number
}

/** One piece of the file in memory, and the box whose insides are walked. */
interface Place {
  view: DataView
  parent: string
  depth: number
  track: WalkedTrack | undefined
}

/**
 * Where boxes that a reader acts on may stand. Parsers look at a box's name alone, so one in the wrong place would be
 * acted on without having been checked.
 */
const PARENTS: Record<string, string> = {
  moov: '', moof: '', mfra: '', mvhd: 'moov', trak: 'moov', mvex: 'moov', mdia: 'trak', edts: 'trak', tkhd: 'trak',
  elst: 'edts', mdhd: 'mdia', minf: 'mdia', stbl: 'minf', stsd: 'stbl', stts: 'stbl', ctts: 'stbl', stss: 'stbl',
  stsz: 'stbl', stz2: 'stbl', stsc: 'stbl', stco: 'stbl', co64: 'stbl', traf: 'moof', tfhd: 'traf', tfdt: 'traf',
  trun: 'traf', tfra: 'mfra', keys: 'meta',
}

const CONTAINERS = ['moov', 'moof', 'mfra', 'mvex', 'mdia', 'minf', 'dinf', 'edts', 'stbl', 'traf', 'wave']
/** Each says that frames are locked with a key; no browser opens them without the seller's service. */
const ENCRYPTED = ['sinf', 'schi', 'pssh', 'senc', 'saiz', 'saio', 'tenc']

/** Walks the boxes of a piece of the file, checks the tables and gathers what the walk is for. */
export function walkBoxes(walk: Walk, bytes: Uint8Array, parent = ''): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  walkInside(walk, { view, parent, depth: 0, track: undefined }, 0, bytes.byteLength)
}

function walkInside(walk: Walk, place: Place, from: number, to: number): void {
  if (place.depth > NESTING_MAX)
    throw new UnsoundFilm('unreadable', 'boxes nest too deep')
  for (const box of boxesWithin(place.view, from, to, walk.budget))
    visitBox(walk, place, box)
}

function visitBox(walk: Walk, place: Place, box: Box): void {
  const expected = PARENTS[box.type]
  if (expected !== undefined && expected !== place.parent)
    throw new UnsoundFilm('unreadable', `${box.type} stands where it may not`)
  if (ENCRYPTED.includes(box.type))
    throw new UnsoundFilm('unreadable', 'its frames are encrypted')
  const inside: Place = { ...place, parent: box.type, depth: place.depth + 1 }
  if (place.track)
    TABLE_CHECKS[box.type]?.(place.view, box, place.track, walk.fileBytes)
  else if (box.type === 'tfra')
    TABLE_CHECKS.tfra?.(place.view, box, newTrack(), walk.fileBytes)
  if (CONTAINERS.includes(box.type))
    walkInside(walk, inside, box.body, box.end)
  else
    VISITS[box.type]?.(walk, inside, box)
  if (place.parent === 'udta' || place.parent === 'ilst')
    noteTag(walk, place, box)
}

const VISITS: Record<string, (walk: Walk, inside: Place, box: Box) => void> = {
  trak: (walk, inside, box) => {
    const track = newTrack()
    walk.tracks.push(track)
    walkInside(walk, { ...inside, track }, box.body, box.end)
    checkAgreement(track)
  },
  mvhd: (walk, { view }, box) => {
    requireBody(box, 24)
    walk.movieTimescale = view.getUint32(box.body + (view.getUint8(box.body) === 1 ? 20 : 12))
  },
  mdhd: (_, { view, track }, box) => {
    requireBody(box, 24)
    const isLong = view.getUint8(box.body) === 1
    if (isLong)
      requireBody(box, 36)
    if (!track)
      return
    track.timescale = view.getUint32(box.body + (isLong ? 20 : 12))
    track.durationTicks = isLong ? readUint64(view, box.body + 24) : view.getUint32(box.body + 16)
  },
  hdlr: (walk, { view, track }, box) => {
    requireBody(box, 12)
    // A second one inside `minf` names QuickTime's data handler, not the kind of the track.
    if (track && track.handler === '')
      track.handler = readType(view, box.body + 8)
    if (track?.handler === 'soun')
      walk.traces.hasSound = true
  },
  elst: (_, { view, track }, box) => track?.edits.push(...readEdits(view, box)),
  stsd: visitDescriptions,
  trun: (walk, { view }, box) => {
    walk.runFrameCount += countRun(view, box)
    limitFrames({ ...newTrack(), handler: 'vide' }, walk.runFrameCount)
  },
  udta: (walk, inside, box) => walkInside(walk, inside, box.body, box.end),
  ilst: (walk, inside, box) => walkInside(walk, inside, box.body, box.end),
  meta: (walk, inside, box) => {
    requireBody(box, 4)
    // ISO's begins with version and flags, QuickTime's at once with its first box, whose size is not zero.
    const skipped = inside.view.getUint32(box.body) === 0 ? 4 : 0
    walkInside(walk, inside, box.body + skipped, box.end)
  },
  keys: visitKeys,
  uuid: (walk, inside, box) => walk.traces.noteBlob(bytesOf(inside.view, box)),
}

function newTrack(): WalkedTrack {
  return { handler: '', timescale: 0, durationTicks: 0, timedCount: 0, offsetCount: 0, sizedCount: 0, edits: [] }
}

/** Sample descriptions: how long the fixed part before their inner boxes is depends on the kind of track. */
function visitDescriptions(walk: Walk, inside: Place, box: Box): void {
  const { view, track } = inside
  requireBody(box, 8)
  const entries = [...boxesWithin(view, box.body + 8, box.end, walk.budget)]
  if (entries.length < view.getUint32(box.body + 4))
    throw new UnsoundFilm('unreadable', 'stsd announces more entries than it holds')
  for (const entry of entries) {
    if (track?.handler === 'vide' || track?.handler === 'soun') {
      const fixedBytes = track.handler === 'vide' ? 78 : soundEntryBytes(view, entry)
      requireBody(entry, fixedBytes)
      walkInside(walk, { ...inside, parent: entry.type, depth: inside.depth + 1 }, entry.body + fixedBytes, entry.end)
    }
    else {
      walk.traces.noteTimedMetadata(entry.type, bytesOf(view, entry))
    }
  }
}

/** QuickTime File Format, sound sample descriptions: versions 1 and 2 have 16 and 36 bytes more. */
function soundEntryBytes(view: DataView, entry: Box): number {
  requireBody(entry, 28)
  return 28 + ([0, 16, 36][view.getUint16(entry.body + 8)] ?? 0)
}

function readEdits(view: DataView, box: Box): Edit[] {
  const isLong = view.getUint8(box.body) === 1
  return Array.from({ length: view.getUint32(box.body + 4) }, (_, index) => {
    const at = box.body + 8 + index * (isLong ? 20 : 12)
    return {
      lengthInMovieTicks: isLong ? readUint64(view, at) : view.getUint32(at),
      startTicks: isLong ? Number(view.getBigInt64(at + 8)) : view.getInt32(at + 4),
      isAtNormalRate: view.getInt32(at + (isLong ? 16 : 8)) === 0x10000,
    }
  })
}

function visitKeys(walk: Walk, { view }: Place, box: Box): void {
  requireBody(box, 8)
  // Each key is laid out as a box whose name is its namespace and whose body is its text.
  const keys = [...boxesWithin(view, box.body + 8, box.end, walk.budget)]
  if (keys.length < view.getUint32(box.body + 4))
    throw new UnsoundFilm('unreadable', 'keys announces more entries than it holds')
  for (const key of keys)
    walk.traces.noteName(Buffer.from(bytesOf(view, key)).toString('utf8'))
}

function noteTag(walk: Walk, { view }: Place, box: Box): void {
  walk.traces.noteName(box.type)
  walk.traces.noteBlob(bytesOf(view, box))
}

function bytesOf(view: DataView, box: Box): Uint8Array {
  return new Uint8Array(view.buffer, view.byteOffset + box.body, box.end - box.body)
}
