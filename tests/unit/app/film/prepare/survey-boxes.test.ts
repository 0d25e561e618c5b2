import { describe, expect, it } from 'vitest'
import { addToIndex, box, fullBox, latin, lyingBox, movie, u32 } from '#tests/support/film/boxes'
import { readMadeFilm } from '#tests/support/film/films'
import { surveyBoxes } from '~/film/prepare/survey-boxes'

function survey(film: Uint8Array) {
  return surveyBoxes(new Blob([new Uint8Array(film)]))
}

describe('surveyBoxes', () => {
  it.each([
    ['plain-30.mp4', { hasLocation: false, hasSound: false, deviceTags: [] }],
    ['with-sound.mp4', { hasSound: true }],
    ['place-in-keys.mov', { hasLocation: true, deviceTags: ['com.apple.quicktime.model'] }],
    ['place-in-user-data.mp4', { hasLocation: true }],
    ['place-in-text.mov', { hasLocation: true }],
  ])('tells of %s', async (name, expected) => {
    expect(await survey(readMadeFilm(name))).toMatchObject(expected)
  })

  it('finds where the shown part ends, in ticks of the picture track', async () => {
    // Made by ffmpeg from two seconds, its first half second cut: 1.5 s × 15360 ticks.
    expect((await survey(readMadeFilm('edit-list.mp4'))).shown).toEqual({ startTick: 0, endTick: 23_040 })
  })

  it('counts leading empty edits as delay', async () => {
    // Movie ticks 1000 a second: nothing for 0.1 s, then half a second from the start of the media.
    const edits = box('edts', fullBox('elst', u32(2, 100, 0xFFFFFFFF, 0x10000, 500, 0, 0x10000)))
    expect((await survey(movie({}, { inTrak: [edits] }))).shown).toEqual({ startTick: 1536, endTick: 9216 })
  })

  it('finds places in XMP, and in tracks that follow the camera', async () => {
    expect((await survey(movie({}, { after: [box('uuid', Buffer.alloc(16), latin('exif:GPSLatitude'))] }))).hasLocation).toBe(true)
    const motion = box('trak', box('mdia', fullBox('hdlr', u32(0), latin('meta'), Buffer.alloc(13)), box('minf', box('stbl', fullBox('stsd', u32(1), box('camm', Buffer.alloc(8)))))))
    expect((await survey(movie({}, { inMoov: [motion] }))).hasLocation).toBe(true)
  })

  it('finds a phone in user data', async () => {
    expect((await survey(addToIndex(readMadeFilm('plain-30.mp4'), box('udta', box('\u00A9mod', latin('Phone 1')))))).deviceTags).toEqual(['\u00A9mod'])
  })

  it('does not fail on boxes that lie', async () => {
    const nothing = { hasLocation: false, hasSound: false, deviceTags: [], shown: undefined }
    expect(await survey(lyingBox('moov', 4, Buffer.alloc(20)))).toEqual(nothing)
    expect(await survey(lyingBox('moov', 1, Buffer.alloc(2)))).toEqual(nothing)
    expect(await survey(box('moov', lyingBox('mvhd', 8)))).toEqual(nothing)
    expect(await survey(box('moov', box('trak', box('edts', fullBox('elst', u32(0x7FFFFFFF))))))).toEqual(nothing)
    expect(await survey(new Uint8Array(5))).toEqual(nothing)
  })
})
