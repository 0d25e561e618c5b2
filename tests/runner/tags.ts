import type { Outcome } from './outcome'

/** What a piece of work promised, line by line. A test that shows a line carries `[<tag>.<line>]` in its title. */
export interface TagLine {
  number: string
  about: string
  /** Why no test shows it. Such a line may have none. */
  shownByHand?: string
}

export const TAGS: Record<string, readonly TagLine[]> = {
  house: [
    { number: '1', about: 'both commands of the README work from a clean clone; tags tell which line has no test' },
    { number: '2', about: 'the path of a question in the browser, from both sides' },
    { number: '3', about: 'every handler through HTTP: roles, another\'s id, malformed input, a repeated POST' },
    { number: '4', about: 'one guarded transaction; fifty coaches take up one review at once' },
    { number: '5', about: 'a failed migration leaves nothing, errors have one shape, a rejected start exits 1, hostile film' },
    { number: '6', about: 'npm run bench api' },
    { number: '7', about: 'the screens', shownByHand: 'looked at by a person, on a phone\'s width and a desk\'s' },
    { number: 'fakes', about: 'the stand-ins refuse what the real services refuse' },
  ],
  film: [
    { number: '1', about: 'a large film arrives byte for byte over a line that breaks; npm run bench upload and prepare' },
    { number: '2', about: 'film as phones make it is served right or explained, and nothing cut away remains' },
    { number: '3', about: 'hostile and broken files are refused and leave nothing' },
    { number: '4', about: 'the whole ask on a phone: a coach\'s link, a lost line, a closed page, a declined file' },
    { number: '5', about: 'abandoned uploads are gone, a crash heals, store and rows agree' },
  ],
}

export interface TagReport {
  lines: string[]
  /** A failure for each line that has no test, so that the count at the end holds it too. */
  missing: Outcome[]
}

export function hasTag(outcome: Outcome, tag: string): boolean {
  return outcome.title.includes(`[${tag}.`)
}

/** How many tests show each line of `tag`, and whether they passed. */
export function reportTag(tag: string, lines: readonly TagLine[], outcomes: readonly Outcome[]): TagReport {
  const missing: Outcome[] = []
  const known = new Set(lines.map(line => line.number))
  const shown = lines.map(({ number, about, shownByHand }) => {
    const label = `[${tag}.${number}]`
    const carrying = outcomes.filter(outcome => outcome.title.includes(label))
    const failed = carrying.filter(outcome => !outcome.hasPassed).length
    if (carrying.length === 0 && shownByHand === undefined) {
      missing.push({ title: label, file: undefined, hasPassed: false, message: `No test carries ${label}: ${about}.` })
    }
    return `${label.padEnd(16)} ${tally(carrying.length, failed, shownByHand)}  ${about}`
  })
  const strangers = numbersIn(tag, outcomes).filter(number => !known.has(number))
  for (const number of strangers) {
    missing.push({ title: `[${tag}.${number}]`, file: undefined, hasPassed: false, message: `tests/runner/tags.ts knows no [${tag}.${number}].` })
  }
  return { lines: shown, missing }
}

function tally(count: number, failed: number, shownByHand: string | undefined): string {
  if (count === 0) return shownByHand === undefined ? 'NO TEST' : `by hand (${shownByHand})`
  const tests = `${count} ${count === 1 ? 'test' : 'tests'}`
  return failed === 0 ? `${tests}, all passed` : `${tests}, ${failed} FAILED`
}

function numbersIn(tag: string, outcomes: readonly Outcome[]): string[] {
  const pattern = new RegExp(`\\[${tag}\\.([a-z0-9]+)\\]`, 'g')
  return [...new Set(outcomes.flatMap(outcome => [...outcome.title.matchAll(pattern)].flatMap(match => match[1] ?? [])))]
}
