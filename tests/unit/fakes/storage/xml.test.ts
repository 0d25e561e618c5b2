import { describe, expect, it } from 'vitest'
import { readPartList } from '#fakes/storage/part-list'
import { escapeXml, findXmlRoot } from '#fakes/storage/xml'

describe('reading small documents', () => {
  it('reads elements, text, references and an XML declaration', () => {
    expect(findXmlRoot('<?xml version="1.0"?>\n<a xmlns="urn:x"><b>1 &lt; 2 &amp;&#x21;</b><c/></a>\n')).toEqual({
      name: 'a',
      text: '',
      children: [{ name: 'b', text: '1 < 2 &!', children: [] }, { name: 'c', text: '', children: [] }],
    })
  })

  it.each([
    '', 'words', '<a>', '</a>', '<a></b>', '<a></a><b></b>', '<a>1 < 2</a>', '<a>&nbsp;</a>', '<a></a>after', '<a b=c></a>', '<!DOCTYPE a><a></a>',
  ])('finds %j not well-formed', (source) => {
    expect(findXmlRoot(source)).toBeUndefined()
  })

  it('escapes what would end an element or not survive in one', () => {
    const text = 'a<b>&"c"\n\u0001'
    expect(escapeXml(text)).toBe('a&lt;b&gt;&amp;&quot;c&quot;&#xa;&#x1;')
  })
})

describe('the list of parts', () => {
  it('takes entity tags with and without quotes, in the order given', () => {
    const document = '<CompleteMultipartUpload><Part><ETag>&quot;aa&quot;</ETag><PartNumber>2</PartNumber></Part>'
      + '<Part><PartNumber>1</PartNumber><ETag>bb</ETag><ChecksumCRC32>AAAAAA==</ChecksumCRC32></Part></CompleteMultipartUpload>'
    expect(readPartList(document)).toEqual([
      { number: 2, etag: '"aa"', checksums: {} },
      { number: 1, etag: '"bb"', checksums: { crc32: 'AAAAAA==' } },
    ])
  })

  it.each([
    '<Other/>',
    '<CompleteMultipartUpload/>',
    '<CompleteMultipartUpload><Piece/></CompleteMultipartUpload>',
    '<CompleteMultipartUpload><Part><PartNumber>1</PartNumber></Part></CompleteMultipartUpload>',
    '<CompleteMultipartUpload><Part><PartNumber>one</PartNumber><ETag>a</ETag></Part></CompleteMultipartUpload>',
    '<CompleteMultipartUpload><Part><PartNumber>1</PartNumber><ETag>a</ETag><Size>5</Size></Part></CompleteMultipartUpload>',
  ])('refuses %s', (document) => {
    expect(() => readPartList(document)).toThrow(expect.objectContaining({ row: 'malformed-xml' }))
  })
})
