/**
 * Where money stands, in double entry: an amount above zero is owed to or held by us (debit), below zero is a claim on us or income (credit).
 * `card`: held at the card provider. `owed`: prepaid reviews that students have not had yet. `coach`, `studio`: earned.
 */
export const LEDGER_ACCOUNTS = ['card', 'owed', 'coach', 'studio'] as const
export type LedgerAccount = typeof LEDGER_ACCOUNTS[number]

export interface LedgerLine {
  account: LedgerAccount
  /** Whole minor units; the lines of one movement sum to zero. */
  amountMinor: number
}

/** Prepaid: the provider holds it, and it is owed to the student until answered. */
export function saleLines(priceMinor: number): LedgerLine[] {
  return movement(priceMinor, 'card', 'owed')
}

/** Given back to the card: no longer held, no longer owed. */
export function refundLines(amountMinor: number): LedgerLine[] {
  return movement(amountMinor, 'owed', 'card')
}

/**
 * Earned by an answer: no longer owed, split between coach and studio. The coach's share is rounded half up to whole minor units and the studio
 * has the rest, so nothing is lost.
 * @param coachSharePercent 0 to 100, whole.
 */
export function earnedLines(valueMinor: number, coachSharePercent: number): LedgerLine[] {
  checkAmount(valueMinor)
  if (!Number.isInteger(coachSharePercent) || coachSharePercent < 0 || coachSharePercent > 100) {
    throw new RangeError('A share is a whole percentage from 0 to 100.')
  }
  const coachMinor = Math.floor((valueMinor * coachSharePercent + 50) / 100)
  return withoutEmpty([
    { account: 'owed', amountMinor: valueMinor },
    { account: 'coach', amountMinor: -coachMinor },
    { account: 'studio', amountMinor: coachMinor - valueMinor },
  ])
}

export function isBalanced(lines: readonly LedgerLine[]): boolean {
  return lines.reduce((sum, line) => sum + line.amountMinor, 0) === 0
}

/**
 * What each review of a series is worth: whole minor units that sum to the price, the earlier ones a unit more where it does not divide.
 * @param count 1 or more.
 */
export function valuesOfSeries(priceMinor: number, count: number): number[] {
  checkAmount(priceMinor)
  if (!Number.isInteger(count) || count < 1) throw new RangeError('A series holds one review or more.')
  const eachMinor = Math.floor(priceMinor / count)
  const leftMinor = priceMinor - eachMinor * count
  return Array.from({ length: count }, (_, index) => eachMinor + (index < leftMinor ? 1 : 0))
}

function movement(amountMinor: number, debit: LedgerAccount, credit: LedgerAccount): LedgerLine[] {
  checkAmount(amountMinor)
  return withoutEmpty([{ account: debit, amountMinor }, { account: credit, amountMinor: -amountMinor }])
}

function withoutEmpty(lines: LedgerLine[]): LedgerLine[] {
  return lines.filter(line => line.amountMinor !== 0)
}

function checkAmount(amountMinor: number): void {
  if (!Number.isSafeInteger(amountMinor) || amountMinor < 0) throw new RangeError('Money is whole minor units, zero or more.')
}
