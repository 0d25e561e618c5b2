import type { Box } from './mp4-boxes'
import { FILM_MAX_DURATION_MS, FILM_MAX_FRAME_COUNT } from '#shared/domain/film/limits'
import { readUint64, requireBody } from './mp4-boxes'
import { UnsoundFilm } from './reading.errors'

/** What the walk knows of the track it is in. */
export interface TrackTables {
  handler: string
  timescale: number
  durationTicks: number
  /** Samples that the time table, the offset table and the size table speak of. */
  timedCount: number
  offsetCount: number
  sizedCount: number
}

type TableCheck = (view: DataView, box: Box, track: TrackTables, fileBytes: number) => void

/**
 * Checks of every table a reader loops over, by box. Each holds the count it names against the length of its box, and for
 * pictures against the most frames a film may have: the parser allocates by these counts, and 2^31 of them end
 * the process.
 */
export const TABLE_CHECKS: Record<string, TableCheck> = {
  stts: (view, box, track) => {
    track.timedCount += sumCounts(view, box, track)
    limitFrames(track, track.timedCount)
  },
  ctts: (view, box, track) => {
    track.offsetCount += sumCounts(view, box, track)
    limitFrames(track, track.offsetCount)
  },
  stsz: (view, box, track) => {
    requireBody(box, 12)
    const count = view.getUint32(box.body + 8)
    if (view.getUint32(box.body + 4) === 0)
      requireEntries(box, 12, count, 4)
    track.sizedCount += count
    limitFrames(track, track.sizedCount)
  },
  stz2: (view, box, track) => {
    requireBody(box, 12)
    const fieldBits = view.getUint8(box.body + 7)
    if (![4, 8, 16].includes(fieldBits))
      throw new UnsoundFilm('unreadable', 'stz2 has an odd field size')
    const count = view.getUint32(box.body + 8)
    requireEntries(box, 12, count, fieldBits / 8)
    track.sizedCount += count
    limitFrames(track, track.sizedCount)
  },
  stss: (view, box, track) => limitFrames(track, countEntries(view, box, 4)),
  stsc: checkChunkRuns,
  stco: (view, box, track, fileBytes) => checkOffsets(view, box, track, fileBytes, 4),
  co64: (view, box, track, fileBytes) => checkOffsets(view, box, track, fileBytes, 8),
  elst: (view, box) => {
    requireBody(box, 8)
    countEntries(view, box, view.getUint8(box.body) === 1 ? 20 : 12)
  },
  tfra: (view, box) => {
    requireBody(box, 16)
    const lengths = view.getUint32(box.body + 8)
    const numberBytes = (lengths >> 4 & 3) + (lengths >> 2 & 3) + (lengths & 3) + 3
    const timeBytes = view.getUint8(box.body) === 1 ? 16 : 8
    requireEntries(box, 16, view.getUint32(box.body + 12), timeBytes + numberBytes)
  },
}

/** Fails when the three tables of a finished picture track do not speak of the same number of frames. */
export function checkAgreement(track: TrackTables): void {
  if (track.handler === 'vide' && (track.timedCount !== track.sizedCount || track.offsetCount > track.timedCount))
    throw new UnsoundFilm('unreadable', 'its tables do not agree on the number of frames')
}

/** Frames of one run in a fragment (`trun`), its per-frame fields held against the length of the box. */
export function countRun(view: DataView, box: Box): number {
  requireBody(box, 8)
  const flags = view.getUint32(box.body) & 0xFFFFFF
  const count = view.getUint32(box.body + 4)
  const isSet = (bit: number) => ((flags & bit) === 0 ? 0 : 1)
  const headBytes = 8 + 4 * (isSet(0x1) + isSet(0x4))
  requireBody(box, headBytes)
  requireEntries(box, headBytes, count, 4 * (isSet(0x100) + isSet(0x200) + isSet(0x400) + isSet(0x800)))
  return count
}

/**
 * Fails above the most frames of a film, whatever is counted.
 *
 * A track that says it lasts over a minute is told so; any other with so many frames is not sound.
 */
export function limitFrames(track: TrackTables, count: number): void {
  if (track.handler !== 'vide' || count <= FILM_MAX_FRAME_COUNT)
    return
  const lastsLong = track.timescale > 0 && track.durationTicks / track.timescale * 1000 > FILM_MAX_DURATION_MS
  throw new UnsoundFilm(lastsLong ? 'too-long' : 'unreadable', 'more frames than a film can have')
}

function requireEntries(box: Box, headBytes: number, count: number, entryBytes: number): void {
  if (count * entryBytes > box.end - box.body - headBytes)
    throw new UnsoundFilm('unreadable', `${box.type} announces more entries than it holds`)
}

function countEntries(view: DataView, box: Box, entryBytes: number): number {
  requireBody(box, 8)
  const count = view.getUint32(box.body + 4)
  requireEntries(box, 8, count, entryBytes)
  return count
}

function sumCounts(view: DataView, box: Box, track: TrackTables): number {
  const count = countEntries(view, box, 8)
  limitFrames(track, count)
  let sum = 0
  for (let entry = 0; entry < count; entry++)
    sum += view.getUint32(box.body + 8 + entry * 8)
  return sum
}

function checkChunkRuns(view: DataView, box: Box, track: TrackTables): void {
  const count = countEntries(view, box, 12)
  limitFrames(track, count)
  let lastChunk = 0
  for (let entry = 0; entry < count; entry++) {
    const at = box.body + 8 + entry * 12
    const chunk = view.getUint32(at)
    if (chunk <= lastChunk)
      throw new UnsoundFilm('unreadable', 'stsc is out of order')
    limitFrames(track, view.getUint32(at + 4))
    lastChunk = chunk
  }
}

function checkOffsets(view: DataView, box: Box, track: TrackTables, fileBytes: number, entryBytes: 4 | 8): void {
  const count = countEntries(view, box, entryBytes)
  limitFrames(track, count)
  for (let entry = 0; entry < count; entry++) {
    const at = box.body + 8 + entry * entryBytes
    if ((entryBytes === 4 ? view.getUint32(at) : readUint64(view, at)) >= fileBytes)
      throw new UnsoundFilm('unreadable', 'frames lie outside the file')
  }
}
