/**
 * Up to two letters for a round picture: the first of the first and of the last word, in capitals.
 * Whole letters, not halves of surrogate pairs. `?` for a name without any visible character.
 */
export function initials(name: string): string {
  const words = name.trim().split(/\s+/u).filter(Boolean)
  const first = words[0]
  if (first === undefined) return '?'
  const last = words.length > 1 ? words[words.length - 1] : undefined
  return [first, last]
    .map(word => firstLetter(word ?? ''))
    .join('')
    .toLocaleUpperCase('en')
}

/** The word a person is greeted by: the first of the name, or the whole trimmed name when it has no spaces. */
export function firstName(name: string): string {
  return name.trim().split(/\s+/u)[0] ?? ''
}

function firstLetter(word: string): string {
  return [...word][0] ?? ''
}
