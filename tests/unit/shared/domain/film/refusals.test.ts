import { describe, expect, it } from 'vitest'
import { FILM_MAX_BYTES, FILM_MAX_DURATION_MS, FILM_MAX_FRAME_COUNT } from '#shared/domain/film/limits'
import { FILM_REFUSALS, isFilmRefusal } from '#shared/domain/film/refusals'

describe('words of refusals', () => {
  it.each(Object.entries(FILM_REFUSALS))('%s says what is and what to do, in sentences and without cheering', (_, { title, whatToDo }) => {
    expect(title).toMatch(/^This (?:film|file) .*\.$/)
    expect(whatToDo).toMatch(/^[A-Z].{30,}\.$/)
    expect(title + whatToDo).not.toMatch(/!|please|sorry|error|codec|container|metadata/i)
  })

  it('name the limits that hold', () => {
    expect(FILM_REFUSALS['too-large'].title).toContain(`${FILM_MAX_BYTES / 1024 / 1024} MB`)
    expect(FILM_MAX_DURATION_MS).toBe(60_000)
    expect(FILM_MAX_FRAME_COUNT).toBe(60_000)
  })
})

describe('isFilmRefusal', () => {
  it('knows its own reasons only', () => {
    expect(isFilmRefusal('has-sound')).toBe(true)
    expect(isFilmRefusal('constructor')).toBe(false)
    expect(isFilmRefusal('')).toBe(false)
  })
})
