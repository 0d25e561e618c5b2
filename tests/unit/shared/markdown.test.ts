import { describe, expect, it } from 'vitest'
import { markdownToText, renderMarkdown } from '#shared/utils/markdown'

describe('renderMarkdown', () => {
  it('writes what a coach writes', () => {
    expect(renderMarkdown('Keep the **grip end** *travelling*.\n\n1. Slow\n2. Level\n\n> one\n\n`x < y`\n')).toBe(
      '<p>Keep the <strong>grip end</strong> <em>travelling</em>.</p>\n<ol>\n<li>Slow</li>\n<li>Level</li>\n</ol>\n<blockquote>\n<p>one</p>\n</blockquote>\n<p><code>x &lt; y</code></p>\n',
    )
  })

  it('is empty for empty input', () => {
    expect(renderMarkdown('')).toBe('')
    expect(renderMarkdown(' \n\t\n')).toBe('')
  })

  it('moves headings down by two, none below h6', () => {
    expect(renderMarkdown('# a\n## b\n### c\n#### d\n##### e\n###### f\n\ng\n=\n\nh\n-\n').match(/<h\d>\w/g)).toEqual([
      '<h3>a', '<h4>b', '<h5>c', '<h6>d', '<h6>e', '<h6>f', '<h3>g', '<h4>h',
    ])
    expect(renderMarkdown('# a')).toBe('<h3>a</h3>\n')
  })

  it('links to http, https and mailto, and to nothing else', () => {
    expect(renderMarkdown('[a](https://b.test/c?d=1&e=2 "t")')).toBe('<p><a href="https://b.test/c?d=1&amp;e=2" title="t" rel="noopener nofollow">a</a></p>\n')
    expect(renderMarkdown('<mailto:a@b.test> [x](HTTP://b.test)')).toContain('rel="noopener nofollow"')
    expect(renderMarkdown('[a][r]\n\n[r]: http://b.test')).toBe('<p><a href="http://b.test" rel="noopener nofollow">a</a></p>\n')
  })

  it.each([
    '[a](javascript:alert(1))', '[a](JaVaScRiPt:alert(1))', '[a](&#106;avascript:alert(1))', '[a](java\\script:alert(1))', '[a](<javascript:alert(1)>)',
    '[a]( javascript:alert(1))', '[a](\u0001javascript:alert(1))', '[a](data:text/html;base64,PHN2Zz4=)', '[a](vbscript:x)', '[a](file:///etc/passwd)',
    '[a](/reviews)', '[a](//b.test)', '[a](blob:x)', '<javascript:alert(1)>', '[a][r]\n\n[r]: javascript:alert(1)', '[a](https:)', '[a](feed:https://b.test)',
  ])('makes no link of %j', (source) => {
    expect(renderMarkdown(source)).not.toContain('<a')
  })

  it('turns bare addresses and straight quotes into nothing else', () => {
    expect(renderMarkdown('https://b.test "q" (c) ...')).toBe('<p>https://b.test &quot;q&quot; (c) ...</p>\n')
  })

  it.each([
    '<script>alert(1)</script>', '<img src=x onerror=alert(1)>', '<a href="javascript:alert(1)">x</a>', '<svg/onload=alert(1)>', '<!-- x --><b>x</b>',
    '<iframe\nsrc=x>', '[a](https://b.test/"onmouseover="alert(1))', '[a](https://b.test "x\\" onmouseover=\\"alert(1)")', '`<script>`', '```<script>\n<script>\n```',
    '```"><script>alert(1)</script>\nx\n```', '![<script>](https://b.test/x.png)', '# <script>', '<https://b.test/<script>>', '&lt;script&gt;&#60;script&#62;', '| <script> |\n| - |\n| x |',
  ])('lets no markup of its own through in %j', (source) => {
    const rendered = renderMarkdown(source)
    const tags = rendered.match(/<\/?[a-z][^>]*>/gi) ?? []
    for (const tag of tags) {
      expect(tag).toMatch(/^<\/?(?:p|h[3-6]|pre|code|em|strong|s|ul|ol|li|blockquote|hr|br|a)(?: (?:href|title|rel|class|start)="[^"<>]*")*>$/)
    }
    expect(rendered.replace(/<\/?[a-z][^>]*>/gi, '')).not.toContain('<')
  })

  it('shows no picture, only its words', () => {
    expect(renderMarkdown('![the "top" & more](https://b.test/x.png)')).toBe('<p>the &quot;top&quot; &amp; more</p>\n')
    expect(renderMarkdown('![x](data:image/png;base64,AAAA)')).not.toContain('<img')
  })

  it.each([
    ['brackets', '['], ['brackets and words', '[a'], ['pictures', '!['], ['closed brackets', '[]('], ['quotes', '>'], ['quotes and points', '> - '], ['stars', '*a '], ['stars and lines', '*_'],
    ['back ticks', '`a``'], ['entities', '&#'], ['tags', '<a '], ['closed tags', '<a>'], ['comments', '<!--'], ['escapes', '\\['], ['links', '[a](b'], ['autolinks', '<http://'],
    ['references', '[a]: b\n'], ['points', '- a\n'], ['deep points', '- - - - '], ['strikes', '~~a'], ['rows', 'a|b\n-|-\n'], ['nested brackets', '[[a]]'], ['nulls', '\u0000'],
    ['words', 'word '], ['one word', 'x'], ['surrogates', '\uD83C'], ['breaks', 'a  \n'], ['headings', '# a\n'], ['fences', '```\n'], ['indents', '    a\n'],
  ])('takes 100,000 characters of %s in bounded time', (_, unit) => {
    const source = unit.repeat(Math.ceil(100_000 / unit.length)).slice(0, 100_000)
    const startedAtMs = performance.now()
    renderMarkdown(source)
    markdownToText(source)
    // A generous bound for a slow machine: what grows with the square takes minutes at this length.
    expect(performance.now() - startedAtMs).toBeLessThan(10_000)
  }, 60_000)
})

describe('markdownToText', () => {
  it('keeps words and structure, without the marks', () => {
    expect(markdownToText([
      '# What I saw', '', 'The **grip end** hangs', '`24 cm` behind.', '', '- one', '- two', '  1. deep', '  2. deeper', '', '> quoted', '> on', '', '    code <b>', '', '---', '',
      '3. three', '4. four', '', 'See [the film](https://b.test/f) or <https://b.test/g> or <a@b.test>.',
    ].join('\n'))).toBe([
      'What I saw', 'The grip end hangs\n24 cm behind.', '- one\n- two\n  1. deep\n  2. deeper', '> quoted\n> on', 'code <b>', '* * *',
      '3. three\n4. four', 'See the film (https://b.test/f) or https://b.test/g or a@b.test.',
    ].join('\n\n'))
  })

  it('keeps what was typed and is no markup', () => {
    expect(markdownToText('a < b & c \\* "d" &amp;')).toBe('a < b & c * "d" &')
    expect(markdownToText('<script>alert(1)</script>')).toBe('<script>alert(1)</script>')
    expect(markdownToText('[a](javascript:alert(1))')).toBe('[a](javascript:alert(1))')
  })

  it('gives the words of a picture', () => {
    expect(markdownToText('![the top](https://b.test/x.png)')).toBe('the top')
  })

  it('is empty for empty input', () => {
    expect(markdownToText('')).toBe('')
    expect(markdownToText('\n\n')).toBe('')
  })

  it('sets a second paragraph of a point under its words', () => {
    expect(markdownToText('- one\n\n  more\n- two')).toBe('- one\n\n  more\n\n- two')
  })

  it('keeps two lists apart', () => {
    expect(markdownToText('- a\n- b\n\n1. c\n2. d')).toBe('- a\n- b\n\n1. c\n2. d')
  })
})
