import type { PersonRow } from '#shared/types/people'

/**
 * What the list of people says at its top: `3 on your team, 12 students`, with `students and guardians` when it holds both.
 * While more pages wait the numbers are not known, so only the least is given.
 */
export function peopleHeading(rows: readonly Pick<PersonRow, 'role'>[], hasMore: boolean): string {
  if (hasMore) return `More than ${rows.length} people in your studio`
  const count = (...roles: PersonRow['role'][]) => rows.filter(({ role }) => roles.includes(role)).length
  const team = count('coach', 'owner')
  const asking = count('student', 'guardian')
  const who = count('guardian') > 0 ? 'students and guardians' : asking === 1 ? 'student' : 'students'
  return `${team} on your team, ${asking === 0 ? 'no' : asking} ${who}`
}
