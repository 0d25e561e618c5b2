/**
 * `Thu 21 May, 17:00` in the reader's zone. Put together from parts, since the joints that `Intl` itself puts between weekday, date
 * and hour differ between versions of its data; `en-US`, since British data writes September with four letters.
 */
export function momentText(atMs: number, timeZone: string): string {
  const format = new Intl.DateTimeFormat('en-US', {
    timeZone, weekday: 'short', day: 'numeric', month: 'short', hour: '2-digit', minute: '2-digit', hourCycle: 'h23',
  })
  const parts = new Map(format.formatToParts(atMs).map(part => [part.type, part.value]))
  const read = (type: Intl.DateTimeFormatPartTypes) => parts.get(type) ?? ''
  return `${read('weekday')} ${read('day')} ${read('month')}, ${read('hour')}:${read('minute')}`
}
