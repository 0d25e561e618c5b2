import { refuse } from './refusals'

export type FormValue = string | FormTree
export interface FormTree { [name: string]: FormValue }

const KEY = /^([^[\]]+)((?:\[[^[\]]*\])*)$/

/**
 * Reads `a[b][0][c]=d` into nested objects. Lists stay objects keyed by their number, because only a schema
 * knows whether `metadata[0]` is a list or a key that happens to be a digit. `a[]=x` gets the next free number.
 * A later value for the same key replaces an earlier one. Throws `form-expected` for keys that cannot be read.
 */
export function parseForm(body: string): FormTree {
  const tree = emptyTree()
  for (const [key, value] of new URLSearchParams(body)) {
    place(tree, pathOf(key), value, key)
  }
  return tree
}

function pathOf(key: string): string[] {
  const match = KEY.exec(key)
  if (match?.[1] === undefined) return refuse('form-expected', `Cannot read the parameter name '${key}'.`)
  const inner = [...(match[2] ?? '').matchAll(/\[([^[\]]*)\]/g)].map(part => part[1] ?? '')
  return [match[1], ...inner]
}

function place(tree: FormTree, path: string[], value: string, key: string): void {
  let node = tree
  for (const [depth, name] of path.entries()) {
    const slot = name === '' ? String(Object.keys(node).length) : name
    if (depth === path.length - 1) {
      if (typeof node[slot] === 'object') refuse('form-expected', `'${key}' is given both as text and as an object.`)
      node[slot] = value
      return
    }
    const child = node[slot] ?? emptyTree()
    if (typeof child === 'string') return refuse('form-expected', `'${key}' is given both as text and as an object.`)
    node[slot] = child
    node = child
  }
}

// No prototype: a parameter called __proto__ or constructor must be an unknown parameter, nothing more.
function emptyTree(): FormTree {
  return Object.create(null)
}

/** The name of a nested parameter as the wire spells it: `line_items[0][price_data]`. */
export function spellPath(path: readonly PropertyKey[]): string {
  return path.map((part, depth) => depth === 0 ? String(part) : `[${String(part)}]`).join('')
}

/** One text for equal parameters, whatever their order, so that a repeated request can be recognised. */
export function fingerprint(tree: FormTree): string {
  return JSON.stringify(sorted(tree))
}

function sorted(value: FormValue): unknown {
  if (typeof value === 'string') return value
  return Object.keys(value).sort().map(name => [name, sorted(value[name] ?? '')])
}
