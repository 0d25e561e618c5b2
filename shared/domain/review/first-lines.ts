import type { Letter } from './letter'
import { LETTER_FIELDS } from './letter'

/**
 * The beginning of a letter as one plain line of at most `maxChars` characters (`String.length`), for lists and mails: the
 * parts in order, without headings, Markdown signs, pictures and line breaks. Cut after a whole word, or within a word that alone
 * is too long, and then ended with "…" within the limit. An empty letter, or a limit below 1, gives ''.
 */
export function firstLines(letter: Letter, maxChars: number): string {
  const line = LETTER_FIELDS.map(field => plainLine(letter[field])).filter(text => text !== '').join(' ')
  return shortened(line, maxChars)
}

function plainLine(markdown: string): string {
  return markdown
    .replace(/!\[[^\]]*\]\([^)]*\)/g, ' ')
    .replace(/\[([^\]]*)\]\([^)]*\)/g, '$1')
    .replace(/^\s*(?:#{1,6}|>|[-+*]|\d+[.)])\s+/gm, '')
    .replace(/(\*\*|__|[*_`])(?=\S)(.+?)(?<=\S)\1/g, '$2')
    .replace(/\s+/g, ' ')
    .trim()
}

function shortened(line: string, maxChars: number): string {
  if (!(maxChars >= 1)) return ''
  if (line.length <= maxChars) return line
  const room = line.slice(0, Math.floor(maxChars) - 1)
  const isCutBetweenWords = /\s/.test(line.charAt(room.length))
  const lastBlank = room.search(/\s\S*$/)
  const kept = isCutBetweenWords || lastBlank <= 0 ? room : room.slice(0, lastBlank)
  // Half of a surrogate pair would be shown as a broken sign.
  return `${kept.replace(/[\uD800-\uDBFF]$/, '').replace(/[\s,;:–-]+$/, '')}…`
}
