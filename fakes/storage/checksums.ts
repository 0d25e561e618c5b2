import { createHash } from 'node:crypto'
import { crc32 } from 'node:zlib'
import { Refusal } from './refusals'

export const CHECKSUM_ALGORITHMS = ['crc32', 'crc32c', 'sha1', 'sha256'] as const
export type ChecksumAlgorithm = (typeof CHECKSUM_ALGORITHMS)[number]
/** Base64 of the digest (big-endian for the CRCs), by algorithm. */
export type Checksums = Partial<Record<ChecksumAlgorithm, string>>

const DIGEST_BYTES: Record<ChecksumAlgorithm, number> = { crc32: 4, crc32c: 4, sha1: 20, sha256: 32 }

export interface RunningChecksum {
  update(chunk: Uint8Array): void
  digestBase64(): string
}

/** A checksum that is fed piece by piece, so that a body need never be held. */
export function createChecksum(algorithm: ChecksumAlgorithm): RunningChecksum {
  if (algorithm === 'crc32') return createCrc((chunk, crc) => crc32(chunk, crc))
  if (algorithm === 'crc32c') return createCrc(crc32c)
  const hash = createHash(algorithm)
  return { update: chunk => void hash.update(chunk), digestBase64: () => hash.digest('base64') }
}

function createCrc(step: (chunk: Uint8Array, crc: number) => number): RunningChecksum {
  let crc = 0
  return {
    update: (chunk) => {
      crc = step(chunk, crc)
    },
    digestBase64: () => {
      const bytes = Buffer.alloc(4)
      bytes.writeUInt32BE(crc)
      return bytes.toString('base64')
    },
  }
}

/** Castagnoli's polynomial, reflected (RFC 3720, appendix B.4); Node has only the CRC of zlib. */
const CRC32C_POLYNOMIAL = 0x82F63B78
const CRC32C_TABLE = Uint32Array.from({ length: 256 }, (_, byte) => {
  let crc = byte
  for (let bit = 0; bit < 8; bit++) crc = crc & 1 ? (crc >>> 1) ^ CRC32C_POLYNOMIAL : crc >>> 1
  return crc
})

/** CRC-32C of `chunk` continued from `crc` (0 at the start); an unsigned 32-bit number. */
export function crc32c(chunk: Uint8Array, crc = 0): number {
  let state = ~crc
  for (const byte of chunk) state = (state >>> 8) ^ (CRC32C_TABLE[(state ^ byte) & 0xFF] ?? 0)
  return ~state >>> 0
}

/**
 * The checksums a request claims for its body, read through `find` (header, or signed query parameter of the same
 * name). Refuses a value that is not base64 of the right length.
 */
export function readClaimedChecksums(find: (name: string) => string | undefined): Checksums {
  const claimed: Checksums = {}
  for (const algorithm of CHECKSUM_ALGORITHMS) {
    const name = `x-amz-checksum-${algorithm}`
    const value = find(name)
    if (value === undefined) continue
    if (!isBase64Of(value, DIGEST_BYTES[algorithm])) throw new Refusal('invalid-checksum', name)
    claimed[algorithm] = value
  }
  return claimed
}

/** Whether `text` is canonical base64 of exactly `lengthBytes` bytes. */
export function isBase64Of(text: string, lengthBytes: number): boolean {
  const bytes = Buffer.from(text, 'base64')
  return bytes.length === lengthBytes && bytes.toString('base64') === text
}
