import { describe, expect, it } from 'vitest'
import { fingerprint, parseForm, spellPath } from '#fakes/payments/form'
import { Refused } from '#fakes/payments/refusals'

// The tree has no prototypes; JSON makes it comparable.
const plain = (body: string): unknown => JSON.parse(JSON.stringify(parseForm(body)))

describe('form bodies', () => {
  it('reads nested names, numbers included, and decodes', () => {
    expect(plain('a=1&b[c][0][d]=x%20y+z&b[c][1][d]=%C3%A9&metadata[0]=q')).toEqual({
      a: '1', b: { c: { 0: { d: 'x y z' }, 1: { d: 'é' } } }, metadata: { 0: 'q' },
    })
  })

  it('numbers empty brackets, and takes the later of two values', () => {
    expect(plain('expand[]=a&expand[]=b&x=1&x=2')).toEqual({ expand: { 0: 'a', 1: 'b' }, x: '2' })
  })

  it('reads nothing from nothing', () => {
    expect(plain('')).toEqual({})
  })

  it.each(['[a]=1', 'a[b=1', 'a]b=1', 'a=1&a[b]=2', 'a[b]=1&a=2', '=1'])('refuses %s', (body) => {
    expect(() => parseForm(body)).toThrow(Refused)
  })

  it('spells a path as the wire does', () => {
    expect(spellPath(['line_items', 0, 'price_data', 'currency'])).toBe('line_items[0][price_data][currency]')
  })

  it('has one fingerprint for one set of parameters, in any order, and another for any other', () => {
    const same = fingerprint(parseForm('a[b]=1&c=2'))
    expect(fingerprint(parseForm('c=2&a[b]=1'))).toBe(same)
    for (const other of ['a[b]=1', 'a[b]=2&c=2', 'a[d]=1&c=2', 'a=1&c=2', 'a[b]=1&c=2&d=']) {
      expect(fingerprint(parseForm(other))).not.toBe(same)
    }
  })
})
