/** Where a student can practise; a drill is prescribed for a place they have. */
export const PRACTICE_PLACES = ['range_grass', 'range_mat', 'net', 'course', 'home'] as const
export type PracticePlace = typeof PRACTICE_PLACES[number]

/** As read on a label. */
export const PRACTICE_PLACE_WORDS: Readonly<Record<PracticePlace, string>> = {
  range_grass: 'Range, off grass',
  range_mat: 'Range, off mats',
  net: 'Into a net',
  course: 'On the course',
  home: 'At home',
}
