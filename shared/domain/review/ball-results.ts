/** How the ball was struck, as the student says it in one tap. */
export const CONTACTS = ['solid', 'fat', 'thin', 'topped', 'toe', 'heel', 'shank', 'sky', 'missed'] as const
export type Contact = typeof CONTACTS[number]

export const CONTACT_WORDS: Readonly<Record<Contact, string>> = {
  solid: 'Solid',
  fat: 'Fat',
  thin: 'Thin',
  topped: 'Topped',
  toe: 'Toe',
  heel: 'Heel',
  shank: 'Shank',
  sky: 'Sky',
  missed: 'Missed',
}

/** What golfers also call it, in lower case. */
const ALSO_HEARD: Readonly<Record<string, Contact>> = { heavy: 'fat', blade: 'thin', skull: 'thin' }

/** The contact meant by a word as spoken, in any case and with blanks around it; undefined when none is. */
export function findContact(word: string): Contact | undefined {
  const spoken = word.trim().toLowerCase()
  return CONTACTS.find(contact => contact === spoken) ?? (Object.hasOwn(ALSO_HEARD, spoken) ? ALSO_HEARD[spoken] : undefined)
}

/** Left and right are the viewer's, looking at the target, for left-handers too. */
export const FLIGHT_STARTS = ['left', 'straight', 'right'] as const
export type FlightStart = typeof FLIGHT_STARTS[number]
export const FLIGHT_START_WORDS: Readonly<Record<FlightStart, string>> = {
  left: 'Started left',
  straight: 'Started straight',
  right: 'Started right',
}

export const FLIGHT_CURVES = ['left', 'straight', 'right'] as const
export type FlightCurve = typeof FLIGHT_CURVES[number]
export const FLIGHT_CURVE_WORDS: Readonly<Record<FlightCurve, string>> = {
  left: 'Curved left',
  straight: 'Flew straight',
  right: 'Curved right',
}

export const FLIGHT_HEIGHTS = ['low', 'normal', 'high'] as const
export type FlightHeight = typeof FLIGHT_HEIGHTS[number]
export const FLIGHT_HEIGHT_WORDS: Readonly<Record<FlightHeight, string>> = {
  low: 'Low',
  normal: 'Normal height',
  high: 'High',
}

export const SURFACES = ['grass', 'mat', 'net', 'sand'] as const
export type Surface = typeof SURFACES[number]
export const SURFACE_WORDS: Readonly<Record<Surface, string>> = {
  grass: 'Grass',
  mat: 'Mat',
  net: 'Net',
  sand: 'Sand',
}

export interface Flight {
  start: FlightStart
  curve: FlightCurve
  height: FlightHeight
}

/** A flight in one phrase, such as "Started left, curved right, high"; a normal height is not said. */
export function flightWords({ start, curve, height }: Flight): string {
  const words = [FLIGHT_START_WORDS[start], FLIGHT_CURVE_WORDS[curve].toLowerCase()]
  return (height === 'normal' ? words : [...words, FLIGHT_HEIGHT_WORDS[height].toLowerCase()]).join(', ')
}
