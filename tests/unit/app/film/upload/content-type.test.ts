import { describe, expect, it } from 'vitest'
import { findFilmContentType } from '~/film/upload/content-type'

describe('findFilmContentType', () => {
  it.each([
    ['swing.mp4', 'video/mp4', 'video/mp4'],
    ['IMG_0012.MOV', 'video/quicktime', 'video/quicktime'],
    ['IMG_0012.MOV', '', 'video/quicktime'],
    ['swing.m4v', 'video/x-m4v', 'video/mp4'],
    ['swing', 'video/webm', 'video/webm'],
  ])('%s of type "%s" is %s', (name, type, expected) => {
    expect(findFilmContentType(name, type)).toBe(expected)
  })

  it.each([['photo.jpg', 'image/jpeg'], ['swing.avi', 'video/x-msvideo'], ['', '']])('%s of type "%s" is no film we take', (name, type) => {
    expect(findFilmContentType(name, type)).toBeUndefined()
  })
})
