import type { ChecksumAlgorithm, Checksums } from './checksums'
import { CHECKSUM_ALGORITHMS } from './checksums'
import { Refusal } from './refusals'
import type { XmlNode } from './xml'
import { findXmlRoot } from './xml'

/** A part as the client names it when completing. */
export interface NamedPart {
  number: number
  /** With quotes, whether or not the client wrote them. */
  etag: string
  checksums: Checksums
}

const CHECKSUM_ELEMENTS = new Map<string, ChecksumAlgorithm>(
  CHECKSUM_ALGORITHMS.map(algorithm => [`Checksum${algorithm.toUpperCase()}`, algorithm]),
)
const MAX_PARTS = 10_000

/**
 * The parts named by a CompleteMultipartUpload document, in the order given. Refuses a document that is not
 * well-formed, names nothing or more than 10,000 parts, or holds an element outside the schema.
 */
export function readPartList(source: string): NamedPart[] {
  const root = findXmlRoot(source)
  if (root?.name !== 'CompleteMultipartUpload' || root.children.length === 0 || root.children.length > MAX_PARTS) {
    throw new Refusal('malformed-xml')
  }
  return root.children.map(readPart)
}

function readPart(node: XmlNode): NamedPart {
  if (node.name !== 'Part') throw new Refusal('malformed-xml', node.name)
  const part: NamedPart = { number: Number.NaN, etag: '', checksums: {} }
  for (const { name, text } of node.children) {
    const algorithm = CHECKSUM_ELEMENTS.get(name)
    if (name === 'PartNumber' && /^\d{1,9}$/.test(text)) part.number = Number(text)
    else if (name === 'ETag' && text !== '') part.etag = `"${text.replace(/^"|"$/g, '')}"`
    else if (algorithm !== undefined) part.checksums[algorithm] = text
    else throw new Refusal('malformed-xml', name)
  }
  if (Number.isNaN(part.number) || part.etag === '') throw new Refusal('malformed-xml', 'a part needs PartNumber and ETag')
  return part
}
