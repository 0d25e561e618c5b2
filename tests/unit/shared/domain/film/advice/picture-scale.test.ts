import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { defaultClubBuild } from '#shared/domain/clubs/defaults'
import { findPictureScale, millimetresPerPixel } from '#shared/domain/film/advice/picture-scale'

const positive = fc.double({ min: 1, max: 5000, noNaN: true })

describe('millimetresPerPixel', () => {
  it('divides the length by its pixels', () => {
    expect(millimetresPerPixel(0.94, 470)).toBeCloseTo(2, 12)
  })

  it('halves when the picture has twice the pixels', () => {
    fc.assert(fc.property(positive, positive, (lengthM, spanPx) => {
      const once = millimetresPerPixel(lengthM, spanPx) ?? Number.NaN
      expect(millimetresPerPixel(lengthM, spanPx * 2)).toBeCloseTo(once / 2, 9)
    }))
  })

  it.each([[0, 100], [1, 0], [-1, 100], [1, -100], [1, 0.5], [Number.NaN, 100], [1, Number.NaN], [Number.POSITIVE_INFINITY, 1], [1, Number.POSITIVE_INFINITY]])('knows none of %d m over %d px', (lengthM, spanPx) => {
    expect(millimetresPerPixel(lengthM, spanPx)).toBeUndefined()
  })
})

describe('findPictureScale', () => {
  it('takes L · sin(lie) face-on and L down the line', () => {
    // 1 m at 30° shows half a metre face-on; over 250 px that is 2 mm a pixel, down the line 4.
    const signs = { heightPx: 1920, clubSpanPx: 250, club: { lengthM: 1, lieDeg: 30 } }
    expect(findPictureScale({ ...signs, view: 'face_on' })).toEqual({ kind: 'known', millimetresPerPixel: expect.closeTo(2, 10), from: 'club' })
    expect(findPictureScale({ ...signs, view: 'down_the_line' })).toEqual({ kind: 'known', millimetresPerPixel: expect.closeTo(4, 10), from: 'club' })
  })

  it('prefers the club to the golfer', () => {
    expect(findPictureScale({ view: 'face_on', heightPx: 1920, clubSpanPx: 250, club: defaultClubBuild('7-iron'), personShareOfHeight: 0.3 })).toMatchObject({ from: 'club' })
  })

  it('does roughly with the golfer, bent over the ball', () => {
    // 1.80 m · 0.9 over a quarter of 1920 px: 1620 / 480 = 3.375 mm.
    expect(findPictureScale({ view: 'face_on', heightPx: 1920, personShareOfHeight: 0.25, personHeightM: 1.8 }))
      .toEqual({ kind: 'known', millimetresPerPixel: expect.closeTo(3.375, 10), from: 'person' })
  })

  it.each([
    ['nothing', {}],
    ['a club whose length is unknown', { clubSpanPx: 250 }],
    ['a club without pixels', { clubSpanPx: 0, club: defaultClubBuild('driver') }],
    ['a golfer higher than the picture', { personShareOfHeight: 1.2 }],
    ['a golfer of no height', { personShareOfHeight: 0 }],
    ['a share that is no number', { personShareOfHeight: Number.NaN }],
    ['a golfer 0 m tall', { personShareOfHeight: 0.3, personHeightM: 0 }],
  ])('says that it does not know from %s', (_, signs) => {
    expect(findPictureScale({ view: 'face_on', heightPx: 1920, ...signs })).toEqual({ kind: 'unknown' })
  })
})
