/**
 * Smallest charge in the minor unit, for the settlement currency being the same (Stripe documentation,
 * "Minimum and maximum charge amounts"). A currency that is missing here is refused with a hint to add it.
 */
export const MINIMUM_CHARGE_MINOR: Readonly<Record<string, number>> = {
  aud: 50, brl: 50, cad: 50, chf: 50, dkk: 250, eur: 50, gbp: 30, hkd: 400, inr: 50, jpy: 50, myr: 200, nok: 300,
  nzd: 50, sek: 300, sgd: 50, thb: 1000, usd: 50,
}

/** Eight digits is the most the service takes for one charge. */
export const MAXIMUM_CHARGE_MINOR = 99_999_999

/** `1250 usd` as `$12.50`, `500 jpy` as `¥500`: the number of decimals is the currency's own. */
export function formatMinor(amountMinor: number, currency: string): string {
  const format = new Intl.NumberFormat('en', { style: 'currency', currency: currency.toUpperCase() })
  const decimals = format.resolvedOptions().maximumFractionDigits ?? 2
  return format.format(amountMinor / 10 ** decimals)
}
