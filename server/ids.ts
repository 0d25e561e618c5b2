import { createHash, createHmac, randomBytes } from 'node:crypto'

/**
 * A UUIDv7 (RFC 9562, 5.7): 48 bits of time, then 74 random ones. Sorts by time; names a row and is never a secret.
 * @param nowMs UTC epoch milliseconds, 0 to 2^48 - 1.
 */
export function newId(nowMs: number): string {
  const bytes = randomBytes(16)
  bytes.writeUIntBE(nowMs, 0, 6)
  bytes.writeUInt8((bytes.readUInt8(6) & 0x0f) | 0x70, 6)
  bytes.writeUInt8((bytes.readUInt8(8) & 0x3f) | 0x80, 8)
  const hex = bytes.toString('hex')
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-${hex.slice(12, 16)}-${hex.slice(16, 20)}-${hex.slice(20)}`
}

/** 32 random bytes in base64url: what a link carries. Only its hash is stored. */
export function newSecret(): string {
  return randomBytes(32).toString('base64url')
}

/** A plain hash is enough: the input has 256 random bits, so there is nothing to guess. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('base64url')
}

/** A hash that nobody without `key` can test guesses against; for text that may hold a password. */
export function keyedHash(key: string, text: string): string {
  return createHmac('sha256', key).update(text).digest('base64url')
}
