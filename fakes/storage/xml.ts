const NAMESPACE = 'http://s3.amazonaws.com/doc/2006-03-01/'

/** Text made safe for an element. Control characters become references, since raw ones would not survive a parser. */
export function escapeXml(text: string): string {
  return text
    .replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;')
    // eslint-disable-next-line no-control-regex -- keys may hold them, and they are what must be escaped
    .replace(/[\u0000-\u001F]/g, char => `&#x${char.charCodeAt(0).toString(16)};`)
}

/** An element with text. */
export function element(name: string, text: string | number | boolean): string {
  return `<${name}>${escapeXml(String(text))}</${name}>`
}

/** An element with elements. */
export function group(name: string, ...inner: string[]): string {
  return `<${name}>${inner.join('')}</${name}>`
}

/** A whole document; error documents of the service carry no namespace. */
export function xmlDocument(root: string, inner: string[], namespace = true): string {
  const attribute = namespace ? ` xmlns="${NAMESPACE}"` : ''
  return `<?xml version="1.0" encoding="UTF-8"?>\n<${root}${attribute}>${inner.join('')}</${root}>`
}

export interface XmlNode {
  name: string
  text: string
  children: XmlNode[]
}

const ENTITIES: Readonly<Record<string, string>> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: '\'' }

/**
 * Reads a small document of elements and text: no comments, CDATA, doctype or mixed content, which no S3 request has.
 * Undefined when it is not well-formed.
 */
export function findXmlRoot(source: string): XmlNode | undefined {
  const body = source.replace(/^\s*<\?xml[^>]*\?>/, '').trim()
  const root: XmlNode = { name: '', text: '', children: [] }
  const open: XmlNode[] = [root]
  let readTo = 0
  for (const match of body.matchAll(/<(\/?)([A-Z][\w.-]*)((?:\s+[\w:.-]+\s*=\s*(?:"[^"<]*"|'[^'<]*'))*)\s*(\/?)>/gi)) {
    const node = open.at(-1)
    if (node === undefined || !addText(node, body.slice(readTo, match.index))) return undefined
    readTo = match.index + match[0].length
    const [, closing, name = '', , selfClosing] = match
    if (closing === '/') {
      if (open.length < 2 || open.pop()?.name !== name) return undefined
    }
    else {
      const child: XmlNode = { name, text: '', children: [] }
      node.children.push(child)
      if (selfClosing !== '/') open.push(child)
    }
  }
  const [only, second] = root.children
  return open.length === 1 && readTo === body.length && second === undefined && root.text === '' ? only : undefined
}

function addText(node: XmlNode, raw: string): boolean {
  if (/[<>]|&(?!(?:amp|lt|gt|quot|apos|#\d{1,7}|#x[0-9a-fA-F]{1,6});)/.test(raw)) return false
  node.text += raw.trim().replace(/&(#?)(\w+);/g, (_, hash: string, name: string) => {
    if (hash === '') return ENTITIES[name] ?? ''
    const code = name.startsWith('x') ? Number.parseInt(name.slice(1), 16) : Number.parseInt(name, 10)
    return code > 0 && code <= 0x10FFFF ? String.fromCodePoint(code) : '\uFFFD'
  })
  return true
}
