/** Bricks for making MP4 files by hand, sound or not. */

export function u16(...values: number[]): Buffer {
  const bytes = Buffer.alloc(values.length * 2)
  values.forEach((value, index) => bytes.writeUInt16BE(value & 0xFFFF, index * 2))
  return bytes
}

export function u32(...values: number[]): Buffer {
  const bytes = Buffer.alloc(values.length * 4)
  values.forEach((value, index) => bytes.writeUInt32BE(value >>> 0, index * 4))
  return bytes
}

export function latin(text: string): Buffer {
  return Buffer.from(text, 'latin1')
}

/** A box with the size it has. */
export function box(type: string, ...parts: Uint8Array[]): Buffer {
  const body = Buffer.concat(parts)
  return Buffer.concat([u32(body.length + 8), latin(type), body])
}

/** A box that claims another size than it has. */
export function lyingBox(type: string, claimedBytes: number, ...parts: Uint8Array[]): Buffer {
  return Buffer.concat([u32(claimedBytes), latin(type), ...parts])
}

/** A box whose body begins with version 0 and no flags. */
export function fullBox(type: string, ...parts: Uint8Array[]): Buffer {
  return box(type, u32(0), ...parts)
}

export interface MovieTables {
  stts?: Buffer
  stsz?: Buffer
  stsc?: Buffer
  stco?: Buffer
  /** Further boxes in the sample table. */
  more?: Buffer[]
}

const FRAMES = 30
const FRAME_BYTES = 10

/**
 * A film of one second at 30 frames a second whose frames are zeros: nothing here decodes, the tables are what is read. Each
 * table can be replaced by a hostile one.
 */
export function movie(tables: MovieTables = {}, around: { inMoov?: Buffer[], inTrak?: Buffer[], before?: Buffer[], after?: Buffer[] } = {}): Buffer {
  const brand = box('ftyp', latin('isom'), u32(512), latin('isomavc1'))
  const before = Buffer.concat([brand, ...(around.before ?? [])])
  const frames = box('mdat', Buffer.alloc(FRAMES * FRAME_BYTES))
  const offset = before.length + 8
  const sampleTable = box('stbl', description(), tables.stts ?? fullBox('stts', u32(1, FRAMES, 512)), tables.stsz ?? fullBox('stsz', u32(FRAME_BYTES, FRAMES)), tables.stsc ?? fullBox('stsc', u32(1, 1, FRAMES, 1)), tables.stco ?? fullBox('stco', u32(1, offset)), ...(tables.more ?? []))
  const media = box('mdia', mediaHeader(15360, FRAMES * 512), handler('vide'), box('minf', sampleTable))
  const index = box('moov', movieHeader(), box('trak', trackHeader(), media, ...(around.inTrak ?? [])), ...(around.inMoov ?? []))
  return Buffer.concat([before, frames, index, ...(around.after ?? [])])
}

export function movieHeader(): Buffer {
  return fullBox('mvhd', u32(0, 0, 1000, 1000, 0x10000), u16(0x100), Buffer.alloc(10), unityMatrix(), Buffer.alloc(24), u32(2))
}

export function trackHeader(id = 1): Buffer {
  return box('tkhd', u32(3, 0, 0, id, 0, 1000), Buffer.alloc(16), unityMatrix(), u32(96 << 16, 160 << 16))
}

export function mediaHeader(timescale: number, ticks: number): Buffer {
  return fullBox('mdhd', u32(0, 0, timescale, ticks, 0))
}

export function handler(kind: string): Buffer {
  return fullBox('hdlr', u32(0), latin(kind), Buffer.alloc(13))
}

function unityMatrix(): Buffer {
  return u32(0x10000, 0, 0, 0, 0x10000, 0, 0, 0, 0x40000000)
}

/** H.264 High, level 1.2, with the parameter sets of `plain-30.mp4`. */
export function description(inEntry: Buffer[] = []): Buffer {
  const sets = Buffer.from('0164000cffe100196764000cac4c2230ad8088000003000800000301e078a1508c01000768e8430104b22cfdf8f800', 'hex')
  const entry = box('avc1', Buffer.alloc(6), u16(1), Buffer.alloc(16), u16(96, 160), u32(0x480000, 0x480000, 0), u16(1), Buffer.alloc(32), u16(24, 0xFFFF), box('avcC', sets), ...inEntry)
  return fullBox('stsd', u32(1), entry)
}

/** QuickTime metadata with one key, its value of the given well-known type (1 text, 23 a 32-bit float). */
export function metadata(key: string, kind: number, value: Buffer): Buffer {
  const keys = fullBox('keys', u32(1), box('mdta', latin(key)))
  const list = box('ilst', Buffer.concat([u32(24 + value.length, 1), box('data', u32(kind, 0), value)]))
  return box('meta', fullBox('hdlr', u32(0), latin('mdta'), Buffer.alloc(13)), keys, list)
}

/** Adds a box to the end of the index of a film whose index comes last, so that no offset moves. */
export function addToIndex(film: Uint8Array, added: Buffer): Buffer {
  const at = Buffer.from(film).lastIndexOf(latin('moov')) - 4
  const head = Buffer.from(film.subarray(0, at))
  const index = Buffer.from(film.subarray(at + 8))
  return Buffer.concat([head, box('moov', index, added)])
}
