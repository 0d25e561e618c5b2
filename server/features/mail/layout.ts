import type { Markup } from './html'
import { html, raw } from './html'

/** A letter ready to send. */
export interface Letter {
  /** One line. */
  subject: string
  text: string
  html: string
}

/** One piece of a letter, written into the HTML and the text part alike, so that the two cannot drift apart. */
export type LetterBlock
  = { kind: 'paragraph', text: string }
    /** The one thing to do. `label` says it in words; the address stands in the text part. */
    | { kind: 'button', label: string, url: string }
    /** A lesser thing to do, in a sentence of its own. */
    | { kind: 'link', before: string, label: string, url: string }
    | { kind: 'facts', rows: readonly { name: string, value: string }[] }
    /** Words of a coach or student, over one or more lines. */
    | { kind: 'words', title?: string, text: string }
    /** The one change, run over with the marker. Once a letter at most. */
    | { kind: 'marked', label: string, text: string }

export interface LetterDraft {
  subject: string
  /** What mail programs show beside the subject. */
  preheader: string
  heading: string
  blocks: readonly LetterBlock[]
  studioName: string
  /** A whole sentence: why this letter came to this reader. */
  why: string
}

const WORDS_FONT = 'Lora, Georgia, \'Times New Roman\', serif'
const PLAIN_FONT = '\'Public Sans\', -apple-system, \'Segoe UI\', Roboto, Helvetica, Arial, sans-serif'
const PAPER = '#EFF3F3'
const SHEET = '#FFFFFF'
const INK = '#16211F'
const SOFT = '#50605D'
const RULE = '#D3DCDA'
const PEN = '#1B4B8F'
const MARKER = '#FFE36E'

/** Controls, line and paragraph separators, and the characters that turn the direction of what follows them. */
// eslint-disable-next-line no-control-regex
const NOT_FOR_ONE_LINE = /[\u0000-\u001F\u007F-\u009F\u2028\u2029\u200E\u200F\u202A-\u202E\u2066-\u2069]+/g

/** A name or title as one line that cannot break out of its sentence: runs of breaks and controls become one space. */
export function oneLine(text: string): string {
  return text.replace(NOT_FOR_ONE_LINE, ' ').replace(/ {2,}/g, ' ').trim()
}

/** The first word of a name; the whole when it is one word; empty for an empty name. */
export function firstNameOf(name: string): string {
  return oneLine(name).split(' ')[0] ?? ''
}

/**
 * An absolute http or https address, as a browser would write it.
 *
 * @throws {TypeError} for anything else: a letter with a wrong link must not leave
 */
export function safeHref(url: string): string {
  const parsed = URL.canParse(url) ? new URL(url) : undefined
  if (!parsed || !['http:', 'https:'].includes(parsed.protocol)) throw new TypeError('a letter links to http or https only')
  return parsed.href
}

function linesOf(text: string): string[] {
  return text.split(/\r\n|\r|\n|\u2028|\u2029/).map(oneLine)
}

/** Paragraphs of lines; blank lines part them, however many. */
function paragraphsOf(text: string): string[][] {
  const paragraphs: string[][] = [[]]
  for (const line of linesOf(text)) {
    if (line !== '') paragraphs.at(-1)?.push(line)
    else if (paragraphs.at(-1)?.length) paragraphs.push([])
  }
  return paragraphs.filter(lines => lines.length > 0)
}

function joinLines(lines: readonly string[]): Markup {
  return html`${lines.map((line, index) => html`${index > 0 && raw('<br>')}${line}`)}`
}

const PARAGRAPH = `margin:0 0 16px;font:400 18px/1.65 ${WORDS_FONT};color:${INK};overflow-wrap:anywhere;word-break:break-word`

function blockHtml(block: LetterBlock): Markup {
  switch (block.kind) {
    case 'paragraph':
      return html`<p style="${PARAGRAPH}">${oneLine(block.text)}</p>`
    case 'button':
      return html`<p style="margin:24px 0"><a href="${safeHref(block.url)}" style="display:inline-block;background:${PEN};border:1px solid ${PEN};border-radius:8px;padding:12px 20px;font:600 15px/1.4 ${PLAIN_FONT};color:${SHEET};text-decoration:none">${block.label}</a></p>`
    case 'link':
      return html`<p style="${PARAGRAPH}">${block.before} <a href="${safeHref(block.url)}" style="color:${PEN};text-decoration:underline">${block.label}</a>.</p>`
    case 'facts':
      return html`<table role="presentation" cellpadding="0" cellspacing="0" border="0" width="100%" style="margin:0 0 16px;border-collapse:collapse;table-layout:fixed">${block.rows.map(row => html`
<tr><td width="96" style="width:96px;padding:10px 12px 10px 0;border-top:1px solid ${RULE};vertical-align:top;font:400 14px/1.5 ${PLAIN_FONT};color:${SOFT}">${row.name}</td><td style="padding:10px 0;border-top:1px solid ${RULE};vertical-align:top;font:600 15px/1.4 ${PLAIN_FONT};color:${INK};overflow-wrap:anywhere;word-break:break-word">${oneLine(row.value)}</td></tr>`)}
</table>`
    case 'words':
      return html`${block.title && html`<h2 style="margin:0 0 8px;font:500 21px/1.3 ${WORDS_FONT};color:${INK};overflow-wrap:anywhere;word-break:break-word">${oneLine(block.title)}</h2>`}${paragraphsOf(block.text).map(lines => html`<p style="${PARAGRAPH}">${joinLines(lines)}</p>`)}`
    case 'marked':
      return html`<p style="margin:20px 0;font:500 21px/1.6 ${WORDS_FONT};color:${INK};overflow-wrap:anywhere;word-break:break-word"><span style="background:${MARKER};padding:2px 4px;-webkit-box-decoration-break:clone;box-decoration-break:clone">${block.label} ${oneLine(block.text)}</span></p>`
  }
}

function blockText(block: LetterBlock): string {
  switch (block.kind) {
    case 'paragraph': return oneLine(block.text)
    case 'button': return `${block.label}:\n${safeHref(block.url)}`
    case 'link': return `${block.before} ${block.label}:\n${safeHref(block.url)}`
    case 'facts': return block.rows.map(row => `${row.name}: ${oneLine(row.value)}`).join('\n')
    case 'words': return [...(block.title ? [oneLine(block.title)] : []), ...paragraphsOf(block.text).map(lines => lines.join('\n'))].join('\n\n')
    case 'marked': return `${block.label} ${oneLine(block.text)}`
  }
}

function footerLines(draft: LetterDraft): string[] {
  return [`${oneLine(draft.studioName)} writes to you with Turfnote.`, oneLine(draft.why)]
}

/** The ground line with the ball at 0, drawn with borders because mail programs drop SVG and ask before showing pictures. */
const GROUND_LINE = html`<div style="margin:10px 0 24px;height:11px;line-height:0;font-size:0"><div style="height:5px;border-bottom:1px solid ${INK}"></div><div style="width:7px;height:7px;margin:-6px 0 0 32px;border:2px solid ${INK};border-radius:50%;background:${SHEET}"></div></div>`

function pageHtml(draft: LetterDraft): string {
  return html`<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light">
<meta name="format-detection" content="telephone=no,date=no,address=no,email=no,url=no">
<title>${oneLine(draft.subject)}</title>
</head>
<body style="margin:0;padding:0;background:${PAPER};-webkit-text-size-adjust:100%">
<div style="display:none;max-height:0;overflow:hidden;opacity:0">${oneLine(draft.preheader)}</div>
<table role="presentation" cellpadding="0" cellspacing="0" border="0" width="100%" style="background:${PAPER}">
<tr><td align="center" style="padding:16px 12px">
<table role="presentation" cellpadding="0" cellspacing="0" border="0" width="100%" style="max-width:560px;background:${SHEET};border:1px solid ${RULE};border-radius:4px;table-layout:fixed">
<tr><td align="left" style="padding:28px 24px 20px">
<div style="font:600 18px/1.2 ${WORDS_FONT};color:${INK}">Turfnote</div>
${GROUND_LINE}
<h1 style="margin:0 0 16px;text-wrap:balance;font:500 28px/1.25 ${WORDS_FONT};color:${INK};overflow-wrap:anywhere;word-break:break-word">${oneLine(draft.heading)}</h1>
${draft.blocks.map(block => html`${blockHtml(block)}
`)}</td></tr>
</table>
<table role="presentation" cellpadding="0" cellspacing="0" border="0" width="100%" style="max-width:560px;table-layout:fixed">
<tr><td align="left" style="padding:16px 25px;font:400 13px/1.5 ${PLAIN_FONT};color:${SOFT};overflow-wrap:anywhere;word-break:break-word">${joinLines(footerLines(draft))}</td></tr>
</table>
</td></tr>
</table>
</body>
</html>
`.toString()
}

function pageText(draft: LetterDraft): string {
  const body = [oneLine(draft.heading), ...draft.blocks.map(blockText)].filter(part => part !== '').join('\n\n')
  // "-- " with its space is how mail programs know where the signature begins (RFC 3676 4.3).
  return `${body}\n\n-- \n${footerLines(draft).join('\n')}\n`
}

/**
 * One layout for every letter.
 *
 * @throws {TypeError} when an address of a block is not absolute http or https
 */
export function layOut(draft: LetterDraft): Letter {
  return { subject: oneLine(draft.subject), text: pageText(draft), html: pageHtml(draft) }
}
