import { test as base } from '@playwright/test'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

/** The first worker of the browser tests has this number; server tests count from 1. */
const FIRST_INDEX = 30

interface Watched {
  /** Everything that a page complained of: console errors and warnings, thrown errors. */
  complaints: string[]
}

/** A test with a world of its worker's own, and every page of it watched. */
export const test = base.extend<Watched, { world: World }>({
  world: [async ({}, use, info) => { // eslint-disable-line no-empty-pattern -- Playwright reads the names of the first argument
    const world = await startWorld({ index: FIRST_INDEX + info.parallelIndex })
    await use(world)
    await world.close()
  }, { scope: 'worker' }],
  complaints: async ({ browser }, use) => {
    const complaints: string[] = []
    const newContext = browser.newContext.bind(browser)
    browser.newContext = async (...options) => {
      const context = await newContext(...options)
      context.on('console', (message) => {
        if (['error', 'warning'].includes(message.type())) complaints.push(`${message.type()}: ${message.text()}`)
      })
      context.on('weberror', error => complaints.push(`thrown: ${error.error().message}`))
      return context
    }
    await use(complaints)
    browser.newContext = newContext
  },
})

export { expect } from '@playwright/test'

export const PHONE = { width: 390, height: 844 }
export const DESK = { width: 1440, height: 900 }
