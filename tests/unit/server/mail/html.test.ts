import { describe, expect, it } from 'vitest'
import { escapeHtml, html, raw } from '#server/features/mail/html'

describe('html', () => {
  it('escapes text and attribute values alike', () => {
    const name = '"><script>alert(1)</script>\' & co'
    expect(html`<a title="${name}">${name}</a>`.toString()).toBe(
      '<a title="&quot;&gt;&lt;script&gt;alert(1)&lt;/script&gt;&#39; &amp; co">&quot;&gt;&lt;script&gt;alert(1)&lt;/script&gt;&#39; &amp; co</a>',
    )
  })

  it('escapes an ampersand once, and what was escaped already once more', () => {
    expect(escapeHtml('a & b')).toBe('a &amp; b')
    expect(escapeHtml('&amp;')).toBe('&amp;amp;')
  })

  it('leaves markup alone, its own and what raw vouches for', () => {
    expect(html`<p>${html`<b>${'<'}</b>`}${raw('<br>')}</p>`.toString()).toBe('<p><b>&lt;</b><br></p>')
  })

  it('sets lists one after the other and nothing for null, undefined and false', () => {
    expect(html`${['<', html`<i>`, 0]}|${null}${undefined}${false}|`.toString()).toBe('&lt;<i>0||')
  })

  it('does not take an object with a toString of its own for markup', () => {
    const sneaky: string = String({ toString: () => '<script>' })
    expect(html`${sneaky}`.toString()).toBe('&lt;script&gt;')
  })

  it('keeps backslashes of the template as written by the compiler', () => {
    expect(html`a\nb`.toString()).toBe('a\nb')
  })
})
