import type { MarkdownIt as Markdown, Token } from 'markdown-it'
import MarkdownIt from 'markdown-it'

/** Addresses a coach or student may link to; everything else stays as it was typed. */
const ALLOWED_ADDRESS = /^(?:https?:\/\/|mailto:)[^\s]/i

/** The page around a letter has its own h1 and h2. */
const HEADING_DROP = 2
const LOWEST_HEADING = 6

function demote(tag: string): string {
  return `h${Math.min(Number(tag.slice(1)) + HEADING_DROP, LOWEST_HEADING)}`
}

function createRenderer(): Markdown {
  const markdown = new MarkdownIt('default', { html: false, linkify: false, typographer: false, breaks: false })
  // A table does not fit a phone, and a letter is sentences.
  markdown.disable('table')
  markdown.validateLink = address => ALLOWED_ADDRESS.test(address.trim())
  markdown.core.ruler.push('turfnote', (state) => {
    for (const token of state.tokens) {
      if (token.type === 'heading_open' || token.type === 'heading_close') token.tag = demote(token.tag)
      for (const child of token.children ?? []) {
        if (child.type === 'link_open') child.attrSet('rel', 'noopener nofollow')
      }
    }
  })
  // Pictures come as stills of the review, never by address: a letter must not call on other hosts.
  markdown.renderer.rules.image = (tokens, index) => markdown.utils.escapeHtml(tokens[index]?.content ?? '')
  return markdown
}

const markdown = createRenderer()

/**
 * Markdown of a person as HTML that may stand on a page: no raw HTML, no pictures, links to http, https and mailto only,
 * headings from h3 down. Empty for empty input. Time grows with the length; callers bound that by their schema.
 */
export function renderMarkdown(source: string): string {
  return markdown.render(source)
}

function inlineText(tokens: readonly Token[]): string {
  let text = ''
  const openLinks: { address: string, start: number }[] = []
  for (const token of tokens) {
    if (token.type === 'text' || token.type === 'text_special' || token.type === 'code_inline' || token.type === 'image') text += token.content
    else if (token.type === 'softbreak' || token.type === 'hardbreak') text += '\n'
    else if (token.type === 'link_open') openLinks.push({ address: String(token.attrGet('href') ?? ''), start: text.length })
    else if (token.type === 'link_close') {
      const link = openLinks.pop()
      const label = text.slice(link?.start ?? 0)
      if (link && label !== link.address && `mailto:${label}` !== link.address) text += ` (${link.address})`
    }
  }
  return text
}

interface TextLevel {
  /** Set before the first line that follows, then spaces of the same width. */
  marker: string
  /** Set before every further line. */
  indent: string
  /** The number of the next point; null in a list of dots. */
  nextNumber: number | null
}

const LEVEL = /^(?:blockquote|bullet_list|ordered_list|list_item)_(open|close)$/

function openLevel(token: Token, parent: TextLevel | undefined): TextLevel {
  if (token.type === 'blockquote_open') return { marker: '', indent: '> ', nextNumber: null }
  if (token.type === 'ordered_list_open') return { marker: '', indent: '', nextNumber: Number(token.attrGet('start') ?? 1) }
  if (token.type === 'bullet_list_open' || !parent) return { marker: '', indent: '', nextNumber: null }
  const marker = parent.nextNumber === null ? '- ' : `${parent.nextNumber}. `
  if (parent.nextNumber !== null) parent.nextNumber += 1
  return { marker, indent: ' '.repeat(marker.length), nextNumber: null }
}

/** Sets the markers of points that begin here, and the indents of all levels before the other lines. */
function indentBlock(text: string, levels: readonly TextLevel[]): string {
  const first = levels.map(level => level.marker || level.indent).join('')
  const rest = levels.map(level => level.indent).join('')
  for (const level of levels) level.marker = ''
  return text.split('\n').map((line, index) => (index === 0 ? first : rest) + line).join('\n')
}

function blockText(token: Token): string | undefined {
  if (token.type === 'inline') return inlineText(token.children ?? [])
  if (token.type === 'fence' || token.type === 'code_block') return token.content.replace(/\n$/, '')
  return token.type === 'hr' ? '* * *' : undefined
}

/**
 * The same words without markup, for the text part of a letter: blank lines between blocks, `- ` and `1. ` before points,
 * `> ` before quotes, link addresses in brackets behind their words. Empty for empty input.
 */
export function markdownToText(source: string): string {
  const levels: TextLevel[] = []
  let text = ''
  // Paragraphs of a list without blank lines are hidden: those stand line under line.
  let isTight = false
  let wasTight = false
  for (const token of markdown.parse(source, {})) {
    const edge = LEVEL.exec(token.type)?.[1]
    if (edge && levels.length === 0) wasTight = false
    if (edge === 'open') levels.push(openLevel(token, levels.at(-1)))
    if (edge === 'close') levels.pop()
    if (token.type === 'paragraph_open') isTight = token.hidden
    const block = blockText(token)
    if (block === undefined) continue
    if (text !== '') text += isTight && wasTight ? '\n' : '\n\n'
    text += indentBlock(block, levels)
    wasTight = isTight
    isTight = false
  }
  return text
}
