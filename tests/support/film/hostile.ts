import { box, description, fullBox, handler, latin, lyingBox, mediaHeader, movie, trackHeader, u16, u32 } from './boxes'
import { readMadeFilm } from './films'

const TWO_TO_31 = 2 ** 31

/** Files made to exhaust, block or mislead whoever reads them, broken ones and other things. None of them is a film that may be kept. */
export const HOSTILE_FILMS: Record<string, () => Buffer> = {
  '2^31 frames in one entry of the time table': () => movie({ stts: fullBox('stts', u32(1, TWO_TO_31, 512)) }),
  '2^31 frames in time and size table alike': () => movie({ stts: fullBox('stts', u32(1, TWO_TO_31, 1)), stsz: fullBox('stsz', u32(10, TWO_TO_31)) }),
  '2^31 sizes announced, none held': () => movie({ stsz: fullBox('stsz', u32(0, TWO_TO_31)) }),
  '2^31 entries of the time table announced': () => movie({ stts: fullBox('stts', u32(TWO_TO_31, 30, 512)) }),
  '2^31 frames of one offset': () => movie({ more: [fullBox('ctts', u32(1, TWO_TO_31, 0))] }),
  '2^31 key frames announced': () => movie({ more: [fullBox('stss', u32(TWO_TO_31, 1))] }),
  '2^31 frames in a chunk': () => movie({ stsc: fullBox('stsc', u32(1, 1, TWO_TO_31, 1)) }),
  '2^31 runs of chunks announced': () => movie({ stsc: fullBox('stsc', u32(TWO_TO_31, 1, 30, 1)) }),
  '2^31 chunks announced': () => movie({ stco: fullBox('stco', u32(TWO_TO_31, 48)) }),
  '2^31 packed sizes announced': () => movie({ stsz: fullBox('stz2', u32(4, TWO_TO_31)) }),
  '2^31 edits announced': () => movie({}, { inTrak: [box('edts', fullBox('elst', u32(TWO_TO_31, 1000, 0, 0x10000)))] }),
  '2^31 sample descriptions announced': () => withDescription(fullBox('stsd', u32(TWO_TO_31))),
  '2^31 metadata keys announced': () => movie({}, { inMoov: [box('meta', handler('mdta'), fullBox('keys', u32(TWO_TO_31)))] }),
  '2^31 frames in a fragment that needs no table': () => fragmented(box('trun', u32(0, TWO_TO_31))),
  '2^31 frames in a fragment with a field each': () => fragmented(box('trun', u32(0x100, TWO_TO_31))),
  '2^31 entries in the list of fragments': () => fragmented(box('trun', u32(0, 1)), [box('mfra', fullBox('tfra', u32(1, 0, TWO_TO_31)))]),
  '70,000 fragments of one frame': () => Buffer.concat([fragmented(box('trun', u32(0, 1))), ...Array.from({ length: 70_000 }, () => fragment(box('trun', u32(0, 1))))]),
  'a second track hidden in a sample description': () => movie({}, { inMoov: [hiddenTrack()] }),
  'tables outside their sample table': () => movie({}, { inTrak: [box('mdia', fullBox('stts', u32(1, TWO_TO_31, 1)))] }),
  'an index said to be 4 GB': () => Buffer.concat([box('ftyp', latin('isom'), u32(0)), lyingBox('moov', 0xFFFFFFFF, Buffer.alloc(100))]),
  'an index said to be 2^63 bytes': () => Buffer.concat([box('ftyp', latin('isom'), u32(0)), lyingBox('moov', 1, u32(0x80000000, 0), Buffer.alloc(100))]),
  'an index of 12 MB of nothing': () => movie({}, { inMoov: [box('free', Buffer.alloc(12 * 1024 * 1024))] }),
  'a box larger than its parent': () => movie({}, { inMoov: [lyingBox('udta', 5000)] }),
  'a box of size zero inside another': () => movie({}, { inMoov: [lyingBox('udta', 0, Buffer.alloc(64))] }),
  'a box smaller than its header': () => movie({}, { inMoov: [lyingBox('udta', 4, Buffer.alloc(64))] }),
  'a first box of size four, which never advances': () => lyingBox('ftyp', 4, Buffer.alloc(64)),
  'boxes nested 10,000 deep': () => movie({}, { inMoov: [nested('meta', 10_000)] }),
  'boxes nested 10,000 deep in user data': () => movie({}, { inMoov: [nested('udta', 10_000)] }),
  'a million empty boxes': () => movie({}, { inMoov: [Buffer.concat(Array.from({ length: 500_000 }, () => box('free')))] }),
  'a million empty boxes in the file': () => movie({}, { after: [Buffer.concat(Array.from({ length: 500_000 }, () => box('free')))] }),
  'time and size tables of different length': () => movie({ stts: fullBox('stts', u32(1, 31, 512)) }),
  'frames outside the file': () => movie({ stco: fullBox('stco', u32(1, 0x7FFFFFFF)) }),
  'a timescale of zero': () => movie({}, { inTrak: [box('mdia', mediaHeader(0, 0))] }),
  'two indexes': () => Buffer.concat([movie(), movie().subarray(24)]),
  'two picture tracks': () => movie({}, { inMoov: [pictureTrack()] }),
  'a track locked with a key': () => withDescription(description([box('sinf', box('frma', latin('avc1')))])),
  'an edit at half speed': () => movie({}, { inTrak: [box('edts', fullBox('elst', u32(1, 1000, 0, 0x8000)))] }),
  'an index that ends in the middle': () => movie().subarray(0, -20),
  'WebM: a cluster of 2^56 bytes': () => webm([element([0x1F, 0x43, 0xB6, 0x75], [0x01, 0xFF, 0xFF, 0xFF, 0xFF, 0xFF, 0xFF, 0xFE])]),
  'WebM: 70,000 frames': () => webm(Array.from({ length: 70_000 }, () => simpleBlock(0))),
  'WebM: 2,550,000 frames by lacing': () => webm(Array.from({ length: 10_000 }, () => simpleBlock(0x04, 255))),
  'WebM: elements nested without end': () => webm(Array.from({ length: 500_000 }, () => element([0xA0], [0xFF]))),
  'WebM: an open cluster inside itself, 500,000 times': () => webm(Array.from({ length: 500_000 }, () => element([0x1F, 0x43, 0xB6, 0x75], [0xFF]))),
  'WebM: an element that reaches out of its cluster': () => webm([element([0x1F, 0x43, 0xB6, 0x75], [0x88], element([0xE7], [0x81], Buffer.from([0])), element([0x92], [0xE8])), Buffer.alloc(200)]),
  'WebM: junk between clusters, which a parser would search through': () => webm([element([0x1F, 0x43, 0xB6, 0x75], [0x83], element([0xE7], [0x81], Buffer.from([0]))), element([0x92], [0x84], Buffer.alloc(4))]),
  'WebM: two segments': () => webm([element([0x18, 0x53, 0x80, 0x67], [0xFF])]),
  'WebM: tags of 2 MB': () => webm([element([0x12, 0x54, 0xC3, 0x67], [0x10, 0x20, 0, 4], Buffer.from([0xEC, 0x10, 0x20, 0, 0]), Buffer.alloc(2 * 1024 * 1024))]),
  'one byte': () => Buffer.from([0]),
  'a header alone': () => box('ftyp', latin('isom'), u32(512)),
  'text under the name of a film': () => Buffer.from('This is a shopping list: balls, tees, a glove.\n'.repeat(20)),
  'a page under the name of a film': () => Buffer.from('<!doctype html><script>alert(1)</script>'.repeat(20)),
  'zeros': () => Buffer.alloc(5000),
  'ones': () => Buffer.alloc(5000, 0xFF),
  'a film cut in half, its index gone': () => half(readMadeFilm('plain-30.mp4')),
  'a film that lacks its last frames': () => readMadeFilm('faststart-30.mp4').subarray(0, -1000),
  'a film of a phone cut in half': () => half(readMadeFilm('uneven.mov')),
  'a film whose first kilobyte is zeros': () => Buffer.concat([Buffer.alloc(1024), readMadeFilm('faststart-30.mp4').subarray(1024)]),
  'a film written backwards': () => Buffer.from(readMadeFilm('plain-30.mp4')).reverse(),
  'the middle of a film': () => readMadeFilm('b-frames.mp4').subarray(2000, 8000),
  'a photograph': () => padded([0xFF, 0xD8, 0xFF, 0xE1, 0x00, 0x10], 'Exif'),
  'a photograph in the boxes of a film': () => Buffer.concat([box('ftyp', latin('heic'), u32(0), latin('mif1heic')), box('meta', u32(0), handler('pict')), box('mdat', Buffer.alloc(3000, 7))]),
  'an animation': () => padded([], 'GIF89a'),
  'an archive': () => padded([0x50, 0x4B, 0x03, 0x04], 'swing.mp4'),
  'a document': () => padded([], '%PDF-1.7'),
  'a recording without picture': () => padded([], 'ID3'),
  'a film of another kind': () => Buffer.concat([latin('RIFF'), u32(0x10000000), latin('AVI LIST'), Buffer.alloc(3000, 9)]),
  'a list that sends its reader to other addresses': () => Buffer.from('#EXTM3U\n#EXTINF:10,\nhttp://127.0.0.1:1/film.ts\nfile:///etc/hostname\n#EXT-X-ENDLIST\n'),
  'a script of films to fetch': () => Buffer.from('ffconcat version 1.0\nfile http://127.0.0.1:1/film.mp4\nfile /etc/hostname\n'),
}

function half(film: Buffer): Buffer {
  return film.subarray(0, film.length / 2)
}

/** What another format begins with, and nothing that means anything after it. */
function padded(magic: number[], words: string): Buffer {
  return Buffer.concat([Buffer.from(magic), latin(words), Buffer.alloc(3000, 0x5A)])
}

function withDescription(replaced: Buffer): Buffer {
  const film = movie()
  const index = film.lastIndexOf(latin('moov')) - 4
  return Buffer.concat([film.subarray(0, index), box('moov', film.subarray(index + 8, index + 8 + 108), box('trak', trackHeader(), box('mdia', mediaHeader(15360, 15360), handler('vide'), box('minf', box('stbl', replaced, fullBox('stts', u32(1, 30, 512)), fullBox('stsz', u32(10, 30)), fullBox('stsc', u32(1, 1, 30, 1)), fullBox('stco', u32(1, 48)))))))])
}

function pictureTrack(): Buffer {
  const table = box('stbl', description(), fullBox('stts', u32(0)), fullBox('stsz', u32(0, 0)), fullBox('stsc', u32(0)), fullBox('stco', u32(0)))
  return box('trak', trackHeader(2), box('mdia', mediaHeader(15360, 0), handler('vide'), box('minf', table)))
}

/** A picture track of 2^31 frames where a parser that goes by names alone would find it: inside a sound description. */
function hiddenTrack(): Buffer {
  const bomb = box('trak', trackHeader(3), box('mdia', mediaHeader(15360, 0), handler('vide'), box('minf', box('stbl', description(), fullBox('stts', u32(1, TWO_TO_31, 1)), fullBox('stsz', u32(1, TWO_TO_31)), fullBox('stsc', u32(1, 1, 1, 1)), fullBox('stco', u32(1, 0))))))
  const sound = box('mp4a', Buffer.alloc(6), u16(1), Buffer.alloc(8), u16(1, 16, 0, 0, 8000, 0), bomb)
  const table = box('stbl', fullBox('stsd', u32(1), sound), fullBox('stts', u32(0)), fullBox('stsz', u32(0, 0)), fullBox('stsc', u32(0)), fullBox('stco', u32(0)))
  return box('trak', trackHeader(2), box('mdia', mediaHeader(8000, 0), handler('soun'), box('minf', table)))
}

function fragmented(run: Buffer, after: Buffer[] = []): Buffer {
  const empty = { stts: fullBox('stts', u32(0)), stsz: fullBox('stsz', u32(0, 0)), stsc: fullBox('stsc', u32(0)), stco: fullBox('stco', u32(0)) }
  return movie(empty, { inMoov: [box('mvex', fullBox('trex', u32(1, 1, 512, 10, 0)))], after: [fragment(run), ...after] })
}

function fragment(run: Buffer): Buffer {
  return box('moof', box('traf', box('tfhd', u32(0x020000, 1)), fullBox('tfdt', u32(0)), run))
}

/** Built from the outside in: wrapping a buffer anew for each level would copy 10,000 times 10,000 bytes. */
function nested(type: string, depth: number): Buffer {
  return Buffer.concat(Array.from({ length: depth }, (_, level) => Buffer.concat([u32((depth - level) * 8), latin(type)])))
}

function element(id: number[], size: number[], ...body: Buffer[]): Buffer {
  return Buffer.concat([Buffer.from([...id, ...size]), ...body])
}

function simpleBlock(flags: number, ...data: number[]): Buffer {
  return element([0xA3], [0x80 + 4 + data.length], Buffer.from([0x81, 0, 0, flags, ...data]))
}

/** A live WebM with one VP8 track; segment and cluster are left open, as browsers record them. */
function webm(inCluster: Buffer[]): Buffer {
  const head = element([0x1A, 0x45, 0xDF, 0xA3], [0x87], element([0x42, 0x82], [0x84], latin('webm')))
  const video = element([0xE0], [0x86], element([0xB0], [0x81], Buffer.from([96])), element([0xBA], [0x81], Buffer.from([160])))
  const parts = [element([0xD7], [0x81], Buffer.from([1])), element([0x83], [0x81], Buffer.from([1])), element([0x86], [0x85], latin('V_VP8')), video]
  const entry = element([0xAE], [0x80 + Buffer.concat(parts).length], ...parts)
  const tracks = element([0x16, 0x54, 0xAE, 0x6B], [0x80 + entry.length], entry)
  const cluster = element([0x1F, 0x43, 0xB6, 0x75], [0xFF], element([0xE7], [0x81], Buffer.from([0])))
  return Buffer.concat([head, element([0x18, 0x53, 0x80, 0x67], [0xFF]), tracks, cluster, ...inCluster])
}
