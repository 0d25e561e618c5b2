/** Keys as stored with a review, longest club first. */
export const CLUBS = [
  'driver', '3-wood', '5-wood', 'hybrid', '3-iron', '4-iron', '5-iron', '6-iron', '7-iron', '8-iron', '9-iron',
  'pitching-wedge', 'gap-wedge', 'sand-wedge', 'lob-wedge', 'putter',
] as const
export type Club = typeof CLUBS[number]

/** As read on a label. */
export const CLUB_WORDS: Readonly<Record<Club, string>> = {
  'driver': 'Driver',
  '3-wood': '3-wood',
  '5-wood': '5-wood',
  'hybrid': 'Hybrid',
  '3-iron': '3-iron',
  '4-iron': '4-iron',
  '5-iron': '5-iron',
  '6-iron': '6-iron',
  '7-iron': '7-iron',
  '8-iron': '8-iron',
  '9-iron': '9-iron',
  'pitching-wedge': 'Pitching wedge',
  'gap-wedge': 'Gap wedge',
  'sand-wedge': 'Sand wedge',
  'lob-wedge': 'Lob wedge',
  'putter': 'Putter',
}

/** The club's words, or the key as it is when it is not known: a student may own a club that the list lacks. */
export function clubWords(key: string): string {
  const club = CLUBS.find(known => known === key)
  return club ? CLUB_WORDS[club] : key
}
