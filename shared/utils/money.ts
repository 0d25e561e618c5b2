/**
 * A price as people write it: `formatMoney(4500, 'EUR')` is `€45`, `formatMoney(4550, 'EUR')` is `€45.50`.
 *
 * @param minor whole minor units (cents, pence, yen), negative for money given back
 * @param currency ISO 4217 code; how many minor units make a major one comes from it
 * @throws RangeError when the code is not three letters
 */
export function formatMoney(minor: number, currency: string): string {
  const digits = new Intl.NumberFormat('en-GB', { style: 'currency', currency }).resolvedOptions().maximumFractionDigits ?? 2
  const unit = 10 ** digits
  const isWhole = minor % unit === 0
  return new Intl.NumberFormat('en-GB', {
    style: 'currency',
    currency,
    minimumFractionDigits: isWhole ? 0 : digits,
    maximumFractionDigits: isWhole ? 0 : digits,
  }).format(minor / unit)
}
