import type { RangeReader } from './range-reader'
import type { FilmSurvey } from './survey'
import { FILM_MAX_FRAME_COUNT } from '#shared/domain/film/limits'
import { READ_MAX_BYTES } from './range-reader'
import { UnsoundFilm } from './reading.errors'
import { Traces } from './traces'

/** Element ids, from RFC 9559, section 5. */
const EBML = 0x1A45DFA3
const SEGMENT = 0x18538067
const INFO = 0x1549A966
const CLUSTER = 0x1F43B675
const BLOCK_GROUP = 0xA0
const BLOCK = 0xA1
const SIMPLE_BLOCK = 0xA3
const TRACKS = 0x1654AE6B
const TRACK_ENTRY = 0xAE
const TRACK_TYPE = 0x83
const CONTENT_ENCODINGS = 0x6D80
const TAGS = 0x1254C367
const TAG = 0x7373
const SIMPLE_TAG = 0x67C8
const TAG_NAME = 0x45A3
const [VOID, CRC_32] = [0xEC, 0xBF]
const [SEEK_HEAD, CUES, CHAPTERS, ATTACHMENTS] = [0x114D9B74, 0x1C53BB6B, 0x1043A770, 0x1941A469]
const [TIMESTAMP, POSITION, PREVIOUS_SIZE] = [0xE7, 0xA7, 0xAB]
const FILE = 0

const LEVEL_1 = [SEEK_HEAD, INFO, TRACKS, CUES, CHAPTERS, ATTACHMENTS, TAGS, CLUSTER]

/**
 * What may stand in the file, its segment and its clusters. A parser that meets anything else there goes looking for the
 * next thing it knows, and can be led in circles.
 */
const ALLOWED: Record<number, number[]> = {
  [FILE]: [EBML, SEGMENT, VOID],
  [SEGMENT]: [...LEVEL_1, VOID, CRC_32],
  [CLUSTER]: [TIMESTAMP, POSITION, PREVIOUS_SIZE, SIMPLE_BLOCK, BLOCK_GROUP, VOID, CRC_32],
}

/** Walked into; everything else is stepped over. */
const CONTAINERS = [SEGMENT, CLUSTER, BLOCK_GROUP, TRACKS, TRACK_ENTRY, TAGS, TAG, SIMPLE_TAG]
/** Browsers that record live leave these two open, since their end is not known when they begin. */
const MAY_BE_OPEN = [SEGMENT, CLUSTER]
const NESTING_MAX = 8
const SOUND = 2

const ELEMENT_MAX_COUNT = 200_000
/** All of a film that is not frames: an index of 60,000 entries takes about this much. */
const REST_MAX_BYTES = 1024 * 1024
const FETCH_BYTES = 4 * 1024 * 1024

/**
 * Goes over the elements of a WebM before any library parses it: sizes, how many frames, sound and tags.
 *
 * Its frame times stand among the frames, so all of the file is fetched, and a larger one is refused.
 * Throws `UnsoundFilm` with the reason when the film breaks a rule.
 */
export async function surveyWebm(reader: RangeReader): Promise<FilmSurvey> {
  if (reader.bytes > READ_MAX_BYTES)
    throw new UnsoundFilm('webm-too-large', `${reader.bytes} bytes`)
  for (let at = 0; at < reader.bytes; at += FETCH_BYTES)
    await reader.load(at, Math.min(at + FETCH_BYTES, reader.bytes))
  const walk: Walk = { traces: new Traces(), parents: [{ id: FILE, end: reader.bytes, isOpen: false }], seen: new Set(), elementCount: 0, frameCount: 0, restBytes: 0 }
  let at = 0
  while (at < reader.bytes) {
    const element = readElementHeader(reader, at)
    enterElement(walk, element, at)
    noteElement(reader, walk, element)
    at = CONTAINERS.includes(element.id) ? element.body : element.end
  }
  if (!walk.seen.has(INFO) || !walk.seen.has(TRACKS))
    throw new UnsoundFilm('unreadable', 'no index')
  return { traces: walk.traces, shown: undefined }
}

interface Walk {
  traces: Traces
  /** The elements around the present place, outermost first. */
  parents: { id: number, end: number, isOpen: boolean }[]
  seen: Set<number>
  elementCount: number
  frameCount: number
  /** Bytes of all that is neither frames nor walked into. */
  restBytes: number
}

/** Holds an element against the one it stands in, then counts it. */
function enterElement(walk: Walk, element: Element, at: number): void {
  const isPast = (parent: Walk['parents'][number]) => at >= parent.end
    || (parent.isOpen && parent.id === CLUSTER && LEVEL_1.includes(element.id))
  while (walk.parents.length > 1 && walk.parents.slice(-1).some(isPast))
    walk.parents.pop()
  const parent = walk.parents.at(-1)
  if (!parent || !(ALLOWED[parent.id]?.includes(element.id) ?? true) || (element.id === SEGMENT && walk.seen.has(SEGMENT)))
    throw new UnsoundFilm('unreadable', 'an element stands where it may not')
  if (element.end > parent.end || (element.isOpen && !MAY_BE_OPEN.includes(element.id)))
    throw new UnsoundFilm('unreadable', 'cut short')
  walk.seen.add(element.id)
  const isContainer = CONTAINERS.includes(element.id)
  if (isContainer)
    walk.parents.push({ id: element.id, end: element.isOpen ? parent.end : element.end, isOpen: element.isOpen })
  else if (element.id !== SIMPLE_BLOCK && element.id !== BLOCK)
    walk.restBytes += element.end - at
  if (++walk.elementCount > ELEMENT_MAX_COUNT || walk.restBytes > REST_MAX_BYTES || walk.parents.length > NESTING_MAX)
    throw new UnsoundFilm('unreadable', 'more than a film can have')
}

interface Element {
  id: number
  body: number
  end: number
  /** Its size is left open; then `end` is the end of its header. */
  isOpen: boolean
}

/** Id and size are numbers of variable length whose leading zero bits tell how many bytes follow (RFC 8794, section 4). */
function readElementHeader(reader: RangeReader, at: number): Element {
  const head = reader.peek(at, Math.min(at + 12, reader.bytes))
  const idBytes = Math.clz32(head[0] ?? 0) - 23
  const sizeBytes = Math.clz32(head[idBytes] ?? 0) - 23
  if (idBytes > 4 || sizeBytes > 8 || head.length < idBytes + sizeBytes)
    throw new UnsoundFilm('unreadable', 'not an element')
  const id = readNumber(head, 0, idBytes)
  const body = at + idBytes + sizeBytes
  // The marker bit is taken off before summing: with it, eight bytes do not fit exactly into a number.
  const firstByte = (head[idBytes] ?? 0) - 2 ** (8 - sizeBytes)
  const size = firstByte * 256 ** (sizeBytes - 1) + readNumber(head, idBytes + 1, sizeBytes - 1)
  // All ones mean an unknown size; told by the bits, since eight bytes of them are more than a number holds exactly.
  const isOpen = firstByte === 2 ** (8 - sizeBytes) - 1 && head.subarray(idBytes + 1, idBytes + sizeBytes).every(byte => byte === 0xFF)
  return { id, body, end: isOpen ? body : body + size, isOpen }
}

function readNumber(bytes: Uint8Array, from: number, length: number): number {
  return bytes.subarray(from, from + length).reduce((sum, byte) => sum * 256 + byte, 0)
}

/** Frames in one block: one, or as many as its lace says (bits 0x06 of its flags, RFC 9559, section 10.3). */
function countFrames(reader: RangeReader, body: number, end: number): number {
  const head = reader.peek(body, Math.min(end, body + 12))
  const trackBytes = Math.clz32(head[0] ?? 0) - 23
  const flags = head[trackBytes + 2] ?? 0
  return (flags & 0x06) === 0 ? 1 : (head[trackBytes + 3] ?? 0) + 1
}

function noteElement(reader: RangeReader, walk: Walk, { id, body, end }: Element): void {
  if (id === CONTENT_ENCODINGS)
    throw new UnsoundFilm('unreadable', 'its frames are packed or encrypted')
  if (id === TAG_NAME)
    walk.traces.noteName(Buffer.from(reader.peek(body, end)).toString('utf8'))
  if (id === TRACK_TYPE && readNumber(reader.peek(body, Math.min(end, body + 8)), 0, 8) === SOUND)
    walk.traces.hasSound = true
  if (id === SIMPLE_BLOCK || id === BLOCK)
    walk.frameCount += countFrames(reader, body, end)
  if (walk.frameCount > FILM_MAX_FRAME_COUNT)
    throw new UnsoundFilm('unreadable', 'more frames than a film can have')
}
