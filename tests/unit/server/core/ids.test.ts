import { describe, expect, it } from 'vitest'
import { idSchema, tokenSchema } from '#shared/schemas/common'
import { hashSecret, newId, newSecret } from '#server/ids'

describe('newId', () => {
  // RFC 9562, appendix A.6: 2022-02-22T19:22:22.000Z is 0x017F22E279B0 in the first 48 bits.
  it('puts the time first, as the example of RFC 9562 A.6', () => {
    expect(newId(1645557742000).slice(0, 13)).toBe('017f22e2-79b0')
  })

  it('is version 7, variant 10', () => {
    for (let index = 0; index < 200; index += 1) expect(idSchema.safeParse(newId(1645557742000 + index)).success).toBe(true)
  })

  it('sorts by time', () => {
    const ids = [3000, 1000, 2000].map(newId)
    expect([...ids].sort()).toEqual([ids[1], ids[2], ids[0]])
  })
})

describe('newSecret', () => {
  it('has the form that links are checked by and never repeats', () => {
    const secrets = Array.from({ length: 100 }, newSecret)
    expect(secrets.every(secret => tokenSchema.safeParse(secret).success)).toBe(true)
    expect(new Set(secrets).size).toBe(100)
  })

  // FIPS 180-2, B.1: SHA-256 of "abc" is ba7816bf…15ad; here in base64url.
  it('is stored as its SHA-256', () => {
    expect(Buffer.from(hashSecret('abc'), 'base64url').toString('hex')).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad')
  })
})
