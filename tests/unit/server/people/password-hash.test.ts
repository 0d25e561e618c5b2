import { describe, expect, it } from 'vitest'
import { derive, hashPassword, isWeaker, verifyPassword } from '#server/features/people/passwords/password-hash'

/** Cheap enough to hash often; the rules are the same. */
const CHEAP = { logN: 10, r: 8, p: 1 }

describe('scrypt', () => {
  // RFC 7914, section 12, second and third vector (N 1024, r 8, p 16; N 16384, r 8, p 1), 64 bytes each.
  it.each([
    ['password', 'NaCl', { logN: 10, r: 8, p: 16 },
      'fdbabe1c9d3472007856e7190d01e9fe7c6ad7cbc8237830e77376634b3731622eaf30d92e22a3886ff109279d9830dac727afb94a83ee6d8360cbdfa2cc0640'],
    ['pleaseletmein', 'SodiumChloride', { logN: 14, r: 8, p: 1 },
      '7023bdcb3afd7348461c06cd81fd38ebfda8fbba904f8e3ea9b543f6545da1f2d5432955613f0fcf62d49705242a9af9e61e85dc0d651e40dfcf017b45575887'],
  ])('gives what RFC 7914 gives for %s', async (password, salt, cost, expected) => {
    expect((await derive(password, Buffer.from(salt), cost, 64)).toString('hex')).toBe(expected)
  })
})

describe('stored passwords', () => {
  it('says how it was made: N 2^17, r 8, p 1, with a salt of 16 bytes and a key of 32', async () => {
    const stored = await hashPassword('seven plain words')
    const [, name, cost, salt = '', key = ''] = stored.split('$')
    expect([name, cost]).toEqual(['scrypt', 'ln=17,r=8,p=1'])
    expect(Buffer.from(salt, 'base64')).toHaveLength(16)
    expect(Buffer.from(key, 'base64')).toHaveLength(32)
    expect(stored).not.toContain('seven')
  })

  it('knows the right password and no other', async () => {
    const stored = await hashPassword('seven plain words', CHEAP)
    expect(await verifyPassword('seven plain words', stored)).toBe(true)
    expect(await verifyPassword('seven plain word', stored)).toBe(false)
    expect(await verifyPassword('Seven plain words', stored)).toBe(false)
  })

  it('gives one password two hashes', async () => {
    expect(await hashPassword('same', CHEAP)).not.toBe(await hashPassword('same', CHEAP))
  })

  it('takes a letter written as one sign or as two for the same', async () => {
    const stored = await hashPassword('caf\u00e9 au lait', CHEAP)
    expect(await verifyPassword('cafe\u0301 au lait', stored)).toBe(true)
  })

  it('is never right when nothing is stored, not even for the empty password', async () => {
    expect(await verifyPassword('anything', undefined)).toBe(false)
    expect(await verifyPassword('', null)).toBe(false)
  })

  it('does as much work for nobody as for somebody', async () => {
    const stored = await hashPassword('seven plain words')
    const times: Record<string, number[]> = { somebody: [], nobody: [] }
    for (let round = 0; round < 2; round++) {
      for (const [who, hash] of [['somebody', stored], ['nobody', undefined]] as const) {
        const startMs = performance.now()
        await verifyPassword('wrong', hash)
        times[who]?.push(performance.now() - startMs)
      }
    }
    // The quicker ones, since others use this machine too; without the work it would be a thousandth.
    expect(Math.min(...times.nobody ?? [])).toBeGreaterThan(Math.min(...times.somebody ?? []) / 4)
  })

  it('tells hashes that were made with less work', async () => {
    expect(isWeaker(await hashPassword('x', CHEAP))).toBe(true)
    expect(isWeaker(await hashPassword('x', CHEAP), CHEAP)).toBe(false)
  })

  it.each(['', 'plain', '$scrypt$ln=17,r=8$AAAA$AAAA', '$argon2id$v=19$m=1,t=1,p=1$AAAA$AAAA'])('throws for what is no hash of ours: %s', async (stored) => {
    await expect(verifyPassword('x', stored)).rejects.toThrow('not one of ours')
  })
})
