import type { Walk, WalkedTrack } from './mp4-walk'
import type { RangeReader } from './range-reader'
import type { FilmSurvey, ShownWindow } from './survey'
import { BoxBudget, readType, readUint64 } from './mp4-boxes'
import { walkBoxes } from './mp4-walk'
import { UnsoundFilm } from './reading.errors'
import { Traces } from './traces'

/** Top-level boxes that are taken in whole, and how large each may be; the tables of 60,000 frames take under 2 MB. */
const TAKEN_MAX_BYTES: Record<string, number> = {
  moov: 8 * 1024 * 1024,
  moof: 1024 * 1024,
  mfra: 1024 * 1024,
  meta: 1024 * 1024,
  udta: 1024 * 1024,
  uuid: 1024 * 1024,
}

const TRACK_MAX_COUNT = 16

/**
 * Goes over the boxes of an MP4 or MOV before any library parses it: sizes, nesting, the counts of every
 * table, and what the file tells beside its picture. Frames themselves are never read.
 *
 * Throws `UnsoundFilm` with the reason when the film breaks a rule.
 */
export async function surveyMp4(reader: RangeReader): Promise<FilmSurvey> {
  const walk: Walk = { fileBytes: reader.bytes, budget: new BoxBudget(), traces: new Traces(), tracks: [], movieTimescale: 0, runFrameCount: 0 }
  const seen = new Set<string>()
  let at = 0
  while (at + 8 <= reader.bytes) {
    walk.budget.spend()
    const { type, end } = await readTopLevelHeader(reader, at)
    if (type === 'moov' && seen.has('moov'))
      throw new UnsoundFilm('unreadable', 'two indexes')
    seen.add(type)
    const maxBytes = TAKEN_MAX_BYTES[type]
    if (maxBytes !== undefined && end - at > maxBytes)
      throw new UnsoundFilm('unreadable', `${type} is too large`)
    if (maxBytes !== undefined)
      walkBoxes(walk, await reader.read(at, end))
    at = end
  }
  if (!seen.has('moov'))
    // Photographs of phones (HEIC, AVIF) are made of the same boxes.
    throw new UnsoundFilm(seen.has('meta') ? 'not-video' : 'unreadable', 'no index')
  return conclude(walk)
}

async function readTopLevelHeader(reader: RangeReader, at: number): Promise<{ type: string, end: number }> {
  const head = await reader.read(at, Math.min(at + 16, reader.bytes))
  const view = new DataView(head.buffer)
  const shortSize = view.getUint32(0)
  const isLong = shortSize === 1 && view.byteLength === 16
  const size = isLong ? readUint64(view, 8) : shortSize
  // Zero means up to the end of the file, which only the last box may say and which then is.
  const end = shortSize === 0 ? reader.bytes : at + size
  if (end - at < (isLong ? 16 : 8))
    throw new UnsoundFilm('unreadable', 'a box does not fit where it stands')
  if (end > reader.bytes)
    throw new UnsoundFilm('unreadable', 'cut short')
  return { type: readType(view, 4), end }
}

function conclude(walk: Walk): FilmSurvey {
  if (walk.tracks.length > TRACK_MAX_COUNT)
    throw new UnsoundFilm('unreadable', 'too many tracks')
  const pictures = walk.tracks.filter(track => track.handler === 'vide')
  const [picture] = pictures
  if (!picture)
    throw new UnsoundFilm('not-video', 'no picture track')
  if (pictures.length > 1)
    throw new UnsoundFilm('unreadable', 'more than one picture track')
  if (picture.timescale === 0)
    throw new UnsoundFilm('unreadable', 'no timescale')
  return { traces: walk.traces, shown: findShownWindow(walk, picture) }
}

/**
 * The part of the film that is shown, from its edit list (ISO/IEC 14496-12, 8.6.6): leading empty edits delay it, then
 * one edit shows a stretch. A length of zero means to the end.
 */
function findShownWindow({ movieTimescale }: Walk, track: WalkedTrack): ShownWindow | undefined {
  if (track.edits.length === 0)
    return undefined
  const firstShown = track.edits.findIndex(edit => edit.startTicks !== -1)
  const edit = track.edits[firstShown]
  // Several stretches, or one at another speed, would need a player of our own on every screen.
  if (!edit || firstShown !== track.edits.length - 1 || !edit.isAtNormalRate || movieTimescale === 0)
    throw new UnsoundFilm('unreadable', 'its edit list has several parts')
  const toTicks = (movieTicks: number) => movieTicks / movieTimescale * track.timescale
  const delay = track.edits.slice(0, firstShown).reduce((sum, empty) => sum + empty.lengthInMovieTicks, 0)
  const startTick = Math.round(toTicks(delay))
  const isOpen = edit.lengthInMovieTicks === 0
  return { startTick, endTick: isOpen ? Infinity : toTicks(delay + edit.lengthInMovieTicks) }
}
