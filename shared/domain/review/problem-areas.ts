export const PROBLEM_AREAS = ['driving', 'full_swing', 'part_shots', 'around_green', 'sand', 'putting', 'on_course'] as const
export type ProblemArea = typeof PROBLEM_AREAS[number]

export const PROBLEM_AREA_WORDS: Readonly<Record<ProblemArea, string>> = {
  driving: 'Driving',
  full_swing: 'Full swing',
  part_shots: 'Part shots',
  around_green: 'Around the green',
  sand: 'Sand',
  putting: 'Putting',
  on_course: 'On the course',
}

/** The area's words, or the key as it is when it is not known: an old review must still be readable. */
export function problemAreaWords(key: string): string {
  const area = PROBLEM_AREAS.find(known => known === key)
  return area ? PROBLEM_AREA_WORDS[area] : key
}
