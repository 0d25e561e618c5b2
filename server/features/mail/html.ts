/**
 * Markup that is safe to send: made by `html` (which escapes) or vouched for by `raw`. A class, so that a plain
 * string can never be taken for one.
 */
export class Markup {
  constructor(private readonly source: string) {}

  toString(): string {
    return this.source
  }
}

/** What may stand in an `html` template; a list is set one after the other, null, undefined and false as nothing. */
export type MarkupPart = Markup | string | number | null | undefined | false | readonly MarkupPart[]

const ENTITIES: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', '\'': '&#39;' }

/** For text between tags and for attribute values in quotes, double or single. */
export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, character => ENTITIES[character] ?? character)
}

function write(part: MarkupPart): string {
  if (part === null || part === undefined || part === false) return ''
  if (part instanceof Markup) return part.toString()
  if (typeof part === 'string') return escapeHtml(part)
  if (typeof part === 'number') return String(part)
  return part.map(write).join('')
}

/**
 * Tag: everything put in is escaped, unless it is `Markup` already. Attribute values must stand in quotes. It does not
 * know addresses: check them before they become an `href` (`safeHref` in `layout.ts`).
 */
export function html(strings: TemplateStringsArray, ...parts: MarkupPart[]): Markup {
  return new Markup(strings.map((text, index) => text + write(parts[index])).join(''))
}

/** Trusted source only: it is written as it is. */
export function raw(source: string): Markup {
  return new Markup(source)
}
