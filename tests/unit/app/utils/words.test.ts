import { describe, expect, it } from 'vitest'
import { findReturnPath, firstScreen } from '~/utils/first-screen'
import { readToken } from '~/utils/link-token'
import { formatMoney } from '#shared/utils/money'
import { firstName, initials } from '~/utils/names'
import { peopleHeading } from '~/utils/people-heading'

describe('names', () => {
  it.each([
    ['Mara Lindqvist', 'ML'],
    ['Ana Maria de la Cruz', 'AC'],
    ['Cher', 'C'],
    ['  joel   okafor ', 'JO'],
    ['Øyvind Ås', 'ØÅ'],
    ['𝒜nna Bo', '𝒜B'],
    ['', '?'],
    ['   ', '?'],
  ])('initials of %j are %s', (name, letters) => {
    expect(initials(name)).toBe(letters)
  })

  it('greets by the first word', () => {
    expect(firstName(' Joel Okafor')).toBe('Joel')
    expect(firstName('Cher')).toBe('Cher')
    expect(firstName('')).toBe('')
  })
})

describe('money', () => {
  // ISO 4217: two decimals for EUR and GBP, none for JPY, three for KWD.
  it.each([
    [4900, 'EUR', '€49'],
    [7950, 'EUR', '€79.50'],
    [123_456_700, 'GBP', '£1,234,567'],
    [0, 'EUR', '€0'],
    [-4900, 'EUR', '-€49'],
    [4900, 'JPY', 'JP¥4,900'],
  ])('%d of %s is %s', (minor, currency, words) => {
    expect(formatMoney(minor, currency)).toBe(words)
  })

  it('knows currencies with three decimals', () => {
    expect(formatMoney(1234, 'KWD').replace(/\s/g, ' ')).toBe('KWD 1.234')
  })
})

describe('first screen', () => {
  it.each([
    ['student', false, '/reviews'],
    ['guardian', false, '/reviews'],
    ['coach', true, '/desk'],
    ['owner', true, '/desk'],
    ['owner', false, '/studio/people'],
  ] as const)('of a %s (coach: %s) is %s', (role, isCoach, path) => {
    expect(firstScreen({ role, isCoach })).toBe(path)
  })
})

describe('the page to come back to', () => {
  it.each(['/desk', '/reviews/018f?tab=film#letter', '/'])('is taken when it is %s', (to) => {
    expect(findReturnPath(to)).toBe(to)
  })

  it.each(['//evil.test', '/\\evil.test', 'https://evil.test', 'desk', '', '/\t/evil.test', '/\n/evil.test', 'javascript:alert(1)', undefined, null, ['/desk']])('is not taken when it is %j', (to) => {
    expect(findReturnPath(to)).toBeUndefined()
  })
})

describe('the secret of a link', () => {
  const token = 'A'.repeat(43)
  it('is 43 characters of base64url, once', () => {
    expect(readToken(token)).toBe(token)
    expect(readToken(token.slice(1))).toBeUndefined()
    expect(readToken(`${token}=`)).toBeUndefined()
    expect(readToken([token, token])).toBeUndefined()
    expect(readToken(undefined)).toBeUndefined()
  })
})

describe('the heading over people', () => {
  it('counts both sides', () => {
    expect(peopleHeading([{ role: 'owner' }, { role: 'coach' }, { role: 'student' }], false)).toBe('2 on your team, 1 student')
    expect(peopleHeading([{ role: 'owner' }, { role: 'student' }, { role: 'guardian' }], false)).toBe('1 on your team, 2 students and guardians')
    expect(peopleHeading([{ role: 'owner' }], false)).toBe('1 on your team, no students')
  })

  it('claims no number it does not know', () => {
    expect(peopleHeading([{ role: 'owner' }, { role: 'coach' }], true)).toBe('More than 2 people in your studio')
  })
})
