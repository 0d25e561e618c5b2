import { epochDayAt } from '#shared/domain/turnaround/zone'

/**
 * Whole years that a person has lived on the local date in `timeZone` at `nowMs`. Somebody born on 29 February turns a year older
 * on 1 March in common years, the later and so the more careful of the two customs. A birth date in the future gives a negative age.
 *
 * @param birthDate calendar day, `YYYY-MM-DD`.
 */
export function ageInYears(birthDate: string, nowMs: number, timeZone: string): number {
  const today = new Date(epochDayAt(timeZone, nowMs) * 86_400_000)
  const [year = 0, month = 1, day = 1] = birthDate.split('-').map(Number)
  const years = today.getUTCFullYear() - year
  const monthsAhead = today.getUTCMonth() + 1 - month
  const hadBirthday = monthsAhead > 0 || (monthsAhead === 0 && today.getUTCDate() >= day)
  return hadBirthday ? years : years - 1
}
