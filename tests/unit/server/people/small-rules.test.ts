import { IncomingMessage } from 'node:http'
import { Socket } from 'node:net'
import { describe, expect, it } from 'vitest'
import { clientAddress } from '#server/features/people/client-address'
import { emailKey } from '#server/features/people/email-key'
import { takingAtLeast } from '#server/features/people/same-time'
import { freeSlug, slugOf } from '#server/features/people/slug'
import { formatMoment } from '#shared/utils/times'

describe('client address', () => {
  function request(remoteAddress: string | undefined, forwarded?: string) {
    const socket = new Socket()
    Object.defineProperty(socket, 'remoteAddress', { value: remoteAddress })
    const incoming = new IncomingMessage(socket)
    if (forwarded !== undefined) incoming.headers['x-forwarded-for'] = forwarded
    return incoming
  }
  const open = { isBehindTrustedProxy: false }
  const behind = { isBehindTrustedProxy: true }

  it('is the connection itself without a proxy, whatever a header claims', () => {
    expect(clientAddress(request('203.0.113.7', '198.51.100.1'), open)).toBe('203.0.113.7')
  })

  it('is what the proxy saw, the last hop, and not what the client put before it', () => {
    expect(clientAddress(request('127.0.0.1', '10.9.9.9, 198.51.100.1'), behind)).toBe('198.51.100.1')
  })

  it('is the connection when the proxy said nothing', () => {
    expect(clientAddress(request('203.0.113.7'), behind)).toBe('203.0.113.7')
    expect(clientAddress(request('203.0.113.7', ''), behind)).toBe('203.0.113.7')
  })

  it.each([
    ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['2001:0db8:0001:0002::9', '2001:db8:1:2::/64'],
    ['::1', '0:0:0:0::/64'],
    ['fe80::1%eth0', 'fe80:0:0:0::/64'],
    ['::ffff:203.0.113.7', '203.0.113.7'],
    ['64:ff9b::203.0.113.7', '64:ff9b:0:0::/64'],
    ['not an address', 'unknown'],
    [undefined, 'unknown'],
  ])('counts %s as %s', (address, counted) => {
    expect(clientAddress(request(address), open)).toBe(counted)
  })
})

describe('e-mail key', () => {
  it('is one for an address in capitals and in small letters', () => {
    expect(emailKey('Joel@Northfield.TEST')).toBe(emailKey('joel@northfield.test'))
  })
})

describe('answers that take as long', () => {
  it('waits for quick work, and not beyond slow work', async () => {
    const startMs = performance.now()
    expect(await takingAtLeast(60, async () => 'quick')).toBe('quick')
    expect(performance.now() - startMs).toBeGreaterThan(55)
    await expect(takingAtLeast(1, () => Promise.reject(new Error('broken')))).rejects.toThrow('broken')
  })
})

describe('slug', () => {
  it.each([
    ['Mara Lindqvist', 'mara-lindqvist'],
    ['  João  d’Ávila-Núñez ', 'joao-davila-nunez'],
    ['Søren Æbelø', 'soren-aebelo'],
    ['Łukasz Groß', 'lukasz-gross'],
    ['李 小龍', 'coach'],
    ['../../etc', 'etc'],
    ['', 'coach'],
  ])('of %s is %s', (name, slug) => {
    expect(slugOf(name)).toBe(slug)
  })

  it('never begins or ends with a hyphen, however long the name', () => {
    expect(slugOf(`${'a'.repeat(59)} b`)).toBe('a'.repeat(59))
  })

  it('takes the first number that is free', () => {
    expect(freeSlug('mara', new Set())).toBe('mara')
    expect(freeSlug('mara', new Set(['mara', 'mara-2', 'mara-4']))).toBe('mara-3')
  })
})

describe('moments in letters', () => {
  it('are in the zone of the reader', () => {
    const atMs = Date.UTC(2026, 4, 21, 15, 0)
    expect(formatMoment(atMs, 'Europe/Lisbon')).toBe('Thu 21 May, 16:00')
    expect(formatMoment(atMs, 'Asia/Tokyo')).toBe('Fri 22 May, 00:00')
    expect(formatMoment(Date.UTC(2026, 8, 1), 'UTC')).toBe('Tue 1 Sep, 00:00')
  })
})
