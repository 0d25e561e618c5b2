import type { RangeReader } from './range-reader'
import type { FilmSurvey } from './survey'
import { FILM_MAX_FRAME_COUNT } from '#shared/domain/film/limits'
import { READ_MAX_BYTES } from './range-reader'
import { UnsoundFilm } from './reading.errors'
import { Traces } from './traces'

/** Element ids, from RFC 9559, section 5. */
const SEGMENT = 0x18538067
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

/** Walked into; everything else is stepped over. */
const CONTAINERS = [SEGMENT, CLUSTER, BLOCK_GROUP, TRACKS, TRACK_ENTRY, TAGS, TAG, SIMPLE_TAG]
/** Browsers that record live leave these two open, since their end is not known when they begin. */
const MAY_BE_OPEN = [SEGMENT, CLUSTER]
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
  const traces = new Traces()
  const counts = { elements: 0, frames: 0, restBytes: 0 }
  let at = 0
  while (at < reader.bytes) {
    const element = await readElementHeader(reader, at)
    if (++counts.elements > ELEMENT_MAX_COUNT)
      throw new UnsoundFilm('unreadable', 'too many elements')
    const isContainer = CONTAINERS.includes(element.id)
    if (element.end > reader.bytes || (element.isOpen && !MAY_BE_OPEN.includes(element.id)))
      throw new UnsoundFilm('unreadable', 'cut short')
    if (element.id === SIMPLE_BLOCK || element.id === BLOCK)
      counts.frames += await countFrames(reader, element.body, element.end)
    else if (!isContainer)
      counts.restBytes += element.end - at
    if (counts.frames > FILM_MAX_FRAME_COUNT || counts.restBytes > REST_MAX_BYTES)
      throw new UnsoundFilm('unreadable', 'more than a film can have')
    await noteElement(reader, traces, element)
    at = isContainer ? element.body : element.end
  }
  return { traces, shown: undefined }
}

interface Element {
  id: number
  body: number
  end: number
  /** Its size is left open; then `end` is the end of its header. */
  isOpen: boolean
}

/** Id and size are numbers of variable length whose leading zero bits tell how many bytes follow (RFC 8794, section 4). */
async function readElementHeader(reader: RangeReader, at: number): Promise<Element> {
  const head = await reader.read(at, Math.min(at + 12, reader.bytes))
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
async function countFrames(reader: RangeReader, body: number, end: number): Promise<number> {
  const head = await reader.read(body, Math.min(end, body + 12))
  const trackBytes = Math.clz32(head[0] ?? 0) - 23
  const flags = head[trackBytes + 2] ?? 0
  return (flags & 0x06) === 0 ? 1 : (head[trackBytes + 3] ?? 0) + 1
}

async function noteElement(reader: RangeReader, traces: Traces, { id, body, end }: Element): Promise<void> {
  if (id === CONTENT_ENCODINGS)
    throw new UnsoundFilm('unreadable', 'its frames are packed or encrypted')
  if (id === TAG_NAME)
    traces.noteName(Buffer.from(await reader.read(body, end)).toString('utf8'))
  if (id === TRACK_TYPE && readNumber(await reader.read(body, Math.min(end, body + 8)), 0, 8) === SOUND)
    traces.hasSound = true
}
