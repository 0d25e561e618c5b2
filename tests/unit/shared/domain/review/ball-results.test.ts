import { describe, expect, it } from 'vitest'
import {
  CONTACTS, CONTACT_WORDS, FLIGHT_CURVE_WORDS, FLIGHT_HEIGHT_WORDS, FLIGHT_START_WORDS, SURFACES, SURFACE_WORDS, findContact, flightWords,
} from '#shared/domain/review/ball-results'

describe('findContact', () => {
  it('knows every contact by its key and its word', () => {
    expect(CONTACTS.map(findContact)).toEqual([...CONTACTS])
    expect(CONTACTS.map(contact => findContact(CONTACT_WORDS[contact]))).toEqual([...CONTACTS])
    expect(CONTACTS).toHaveLength(9)
  })
  it.each([['heavy', 'fat'], ['Blade', 'thin'], [' skull ', 'thin']])('hears %j as %s', (word, contact) => {
    expect(findContact(word)).toBe(contact)
  })
  it.each(['', 'great', 'toString', '__proto__'])('does not know %j', (word) => {
    expect(findContact(word)).toBeUndefined()
  })
})

describe('flightWords', () => {
  it('says start, curve and a height that is not normal', () => {
    expect(flightWords({ start: 'left', curve: 'right', height: 'high' })).toBe('Started left, curved right, high')
    expect(flightWords({ start: 'straight', curve: 'straight', height: 'normal' })).toBe('Started straight, flew straight')
  })
  it('has three words each', () => {
    for (const words of [FLIGHT_START_WORDS, FLIGHT_CURVE_WORDS, FLIGHT_HEIGHT_WORDS]) expect(new Set(Object.values(words)).size).toBe(3)
  })
})

describe('surfaces', () => {
  it('are four', () => {
    expect(SURFACES.map(surface => SURFACE_WORDS[surface])).toEqual(['Grass', 'Mat', 'Net', 'Sand'])
  })
})
