import { describe, expect, it } from 'vitest'
import { crc32c, createChecksum } from '#fakes/storage/checksums'

function base64OfHex(hex: string): string {
  return Buffer.from(hex, 'hex').toString('base64')
}

/*
 * The check values for "123456789" of the CRC catalogue (CRC-32/ISO-HDLC cbf43926, CRC-32/ISCSI e3069283, the latter
 * also in RFC 3720, appendix B.4); "abc" by FIPS 180-4.
 */
const KNOWN = [
  { algorithm: 'crc32', text: '123456789', hex: 'cbf43926' },
  { algorithm: 'crc32c', text: '123456789', hex: 'e3069283' },
  { algorithm: 'sha1', text: 'abc', hex: 'a9993e364706816aba3e25717850c26c9cd0d89d' },
  { algorithm: 'sha256', text: 'abc', hex: 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad' },
] as const

describe('checksums', () => {
  it.each(KNOWN)('$algorithm of $text, whole and byte by byte', ({ algorithm, text, hex }) => {
    const whole = createChecksum(algorithm)
    whole.update(Buffer.from(text))
    const pieces = createChecksum(algorithm)
    for (const byte of Buffer.from(text)) pieces.update(Buffer.from([byte]))
    expect([whole.digestBase64(), pieces.digestBase64()]).toEqual([base64OfHex(hex), base64OfHex(hex)])
  })

  it('crc32 of nothing is what the SDK puts into presigned addresses by default', () => {
    expect(createChecksum('crc32').digestBase64()).toBe('AAAAAA==')
  })

  // RFC 3720, appendix B.4: 32 bytes of zeroes, of ones, and counting up (there printed least significant byte first).
  it.each([
    [Buffer.alloc(32), 0x8A9136AA],
    [Buffer.alloc(32, 0xFF), 0x62A8AB43],
    [Buffer.from(Array.from({ length: 32 }, (_, index) => index)), 0x46DD794E],
  ])('crc32c by RFC 3720 (%#)', (bytes, expected) => {
    expect(crc32c(bytes)).toBe(expected)
  })
})
