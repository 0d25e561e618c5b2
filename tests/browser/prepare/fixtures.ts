import type { Page } from '@playwright/test'
import { test as base } from '@playwright/test'
import type { SpanS } from '~/film/prepare'
import type { PreparedOnPage } from './page/harness'
import { readOutput } from './read-output'
import { servePage } from './serve-page'

/** A test whose page holds the harness, on a server of its worker's own; the app is not started. */
export const test = base.extend<{ page: Page }, { address: string }>({
  address: [async ({}, use, info) => { // eslint-disable-line no-empty-pattern -- Playwright reads the names of the first argument
    const served = await servePage('tests/browser/prepare/page', `.test/prepare-page/${info.parallelIndex}`)
    await use(served.address)
    await served.close()
  }, { scope: 'worker' }],
  page: async ({ page, address }, use) => {
    const complaints: string[] = []
    page.on('console', (message) => {
      if (['error', 'warning'].includes(message.type())) complaints.push(`${message.type()}: ${message.text()}`)
    })
    page.on('pageerror', error => complaints.push(`thrown: ${error.message}`))
    await page.goto(address)
    await use(page)
    base.expect(complaints, 'the page complained').toEqual([])
  },
})

export { expect } from '@playwright/test'

/** Prepares a film in the page and reads what came out here. */
export async function prepareOn(page: Page, path: string, keep: SpanS[]): Promise<PreparedOnPage & { output: Awaited<ReturnType<typeof readOutput>>, bytes: Uint8Array<ArrayBuffer> }> {
  const made = await page.evaluate(([film, spans]) => globalThis.prepareHarness.prepare(film, spans), [path, keep] satisfies [string, SpanS[]])
  const bytes = new Uint8Array(Buffer.from(made.base64, 'base64'))
  return { ...made, bytes, output: await readOutput(bytes) }
}

/** Lines that run before the worker's own, as if its browser were another. */
export async function inWorker(page: Page, lines: string): Promise<void> {
  await page.route('**/prepare.worker-*.js', async (route) => {
    const answer = await route.fetch()
    await route.fulfill({ response: answer, body: `${lines};\n${await answer.text()}` })
  })
}
