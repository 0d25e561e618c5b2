import { describe, expect, it } from 'vitest'
import { CLUBS, CLUB_WORDS, clubWords } from '#shared/domain/review/clubs'

describe('clubs', () => {
  it('are listed from driver to putter, irons 3 to 9, four wedges', () => {
    expect(CLUBS).toHaveLength(16)
    expect(CLUBS.filter(club => club.endsWith('-iron'))).toEqual(['3-iron', '4-iron', '5-iron', '6-iron', '7-iron', '8-iron', '9-iron'])
    expect(CLUBS.filter(club => club.endsWith('-wedge')).map(clubWords)).toEqual(['Pitching wedge', 'Gap wedge', 'Sand wedge', 'Lob wedge'])
    expect([CLUBS.at(0), CLUBS.at(-1)].map(club => clubWords(club ?? ''))).toEqual(['Driver', 'Putter'])
  })
  it('have words each of their own', () => {
    expect(new Set(Object.values(CLUB_WORDS)).size).toBe(CLUBS.length)
  })
  it('show an unknown club as it is', () => {
    expect(['7-wood', '', 'constructor'].map(clubWords)).toEqual(['7-wood', '', 'constructor'])
  })
})
