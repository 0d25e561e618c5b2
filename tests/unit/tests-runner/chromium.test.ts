import { describe, expect, it } from 'vitest'
import type { Machine } from '#tests/support/chromium'
import { findChromium } from '#tests/support/chromium'

function machine(over: { has?: string[], env?: Record<string, string>, isRoot?: boolean, run?: Machine['run'] } = {}): Machine {
  const has = over.has ?? []
  return {
    environment: over.env ?? {},
    isRoot: over.isRoot ?? false,
    exists: path => has.includes(path),
    run: over.run ?? (() => {
      throw new Error('Nothing was to be run.')
    }),
  }
}

describe('finding Chromium', () => {
  it('takes CHROMIUM_PATH before the usual places', () => {
    expect(findChromium(machine({ has: ['/opt/c', '/usr/bin/chromium'], env: { CHROMIUM_PATH: '/opt/c' } }))).toBe('/opt/c')
  })

  it('does not pass over a CHROMIUM_PATH that leads nowhere', () => {
    expect(() => findChromium(machine({ has: ['/usr/bin/chromium'], env: { CHROMIUM_PATH: '/opt/c' } }))).toThrow('/opt/c')
  })

  it('looks in the usual places', () => {
    expect(findChromium(machine({ has: ['/usr/bin/google-chrome'] }))).toBe('/usr/bin/google-chrome')
  })

  it('installs Debian\'s package when it may', () => {
    const has = ['/usr/bin/apt-get']
    const ran: string[] = []
    const run: Machine['run'] = (program, programArguments) => {
      ran.push([program, ...programArguments].join(' '))
      if (programArguments.includes('chromium')) has.push('/usr/bin/chromium')
      return true
    }
    expect(findChromium(machine({ has, isRoot: true, run }))).toBe('/usr/bin/chromium')
    expect(ran).toEqual(['/usr/bin/apt-get update', '/usr/bin/apt-get install --yes --no-install-recommends chromium'])
  })

  it('says what to do when apt-get fails', () => {
    expect(() => findChromium(machine({ has: ['/usr/bin/apt-get'], isRoot: true, run: () => false }))).toThrow('apt-get install chromium')
  })

  it('runs nothing and says what to do when it is not root', () => {
    expect(() => findChromium(machine({ has: ['/usr/bin/apt-get'] }))).toThrow('CHROMIUM_PATH')
  })
})
