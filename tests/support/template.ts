import { mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { addressesFrom } from '#fakes/demo/addresses'
import { startBuiltApp } from '#fakes/demo/app-process'
import { buildOnce } from '#fakes/demo/build'
import { appEnvironment } from '#fakes/demo/environment'
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from '#fakes/demo/people'
import { insertStudio, openApp } from '#fakes/demo/seed'

export const TEMPLATE_DIR = '.test/template'

const PORTS = addressesFrom(4290, 4391)

/** Builds once, migrates once, hashes the one password once and signs everybody in once; worlds copy what comes of it. */
export async function makeTemplate(): Promise<void> {
  buildOnce()
  rmSync(TEMPLATE_DIR, { recursive: true, force: true })
  mkdirSync(TEMPLATE_DIR, { recursive: true })
  const environment = { ...appEnvironment(PORTS, TEMPLATE_DIR), NUXT_SESSION_NAME: '__Host-turfnote-test', LIMITS_FACTOR: '1000' }
  const app = await openApp(environment)
  await insertStudio(app, Date.now())
  await app.close()

  const running = await startBuiltApp(environment, { isQuiet: true })
  try {
    const cookies = await Promise.all(DEMO_ACCOUNTS.map(async ({ key, email }) => [key, await signIn(running.url, email)]))
    writeFileSync(join(TEMPLATE_DIR, 'cookies.json'), JSON.stringify(Object.fromEntries(cookies)))
  }
  finally {
    await running.stop()
  }
}

async function signIn(url: string, email: string): Promise<string> {
  const response = await fetch(`${url}/api/session`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', 'origin': url },
    body: JSON.stringify({ email, password: DEMO_PASSWORD }),
  })
  if (!response.ok) throw new Error(`Signing in ${email} failed: ${await response.text()}`)
  return response.headers.getSetCookie().map(cookie => cookie.split(';')[0]).join('; ')
}
