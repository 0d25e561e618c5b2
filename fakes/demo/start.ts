import { existsSync, mkdirSync, rmSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { localAddress, readAddresses } from './addresses'
import { startBuiltApp } from './app-process'
import { buildOnce } from './build'
import { appEnvironment } from './environment'
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from './people'
import { seedDemo } from './seed'
import { startStandIns } from './stand-ins'

const DATA_DIR = '.demo'
const DAY_MS = 24 * 60 * 60 * 1000

/** `npm run demo`: an invented studio on this machine. Promises are about today, so data a day old is made afresh. */
async function main(): Promise<void> {
  const addresses = readAddresses(process.env)
  const dataDir = join(DATA_DIR, String(addresses.appPort))
  if (process.argv.includes('--fresh') || isOld(dataDir)) rmSync(dataDir, { recursive: true, force: true })
  mkdirSync(dataDir, { recursive: true })
  buildOnce()

  const standIns = await startStandIns(addresses, dataDir)
  const environment = appEnvironment(addresses, dataDir)
  if (!existsSync(join(dataDir, 'turfnote.sqlite'))) {
    console.log('Making the studio …')
    await seedDemo(environment)
  }
  const app = await startBuiltApp({ ...environment, LOG_LEVEL: 'warn' }, { isQuiet: true })

  console.log(`
Turfnote    ${app.url}
Inbox       ${standIns.inboxUrl}   (every letter that the studio sends)
Film store  ${localAddress(addresses.storagePort)}/__fake__/state
Card page   ${localAddress(addresses.paymentsPort)}/__fake__/state

Sign in with the password ${DEMO_PASSWORD}
${DEMO_ACCOUNTS.map(account => `  ${account.email.padEnd(32)} ${account.words}`).join('\n')}

Ctrl-C ends it. Start with --fresh for new data.`)

  for (const signal of ['SIGINT', 'SIGTERM'] as const) {
    process.once(signal, () => {
      void app.stop().then(() => standIns.close()).then(() => process.exit(0))
    })
  }
}

function isOld(dataDir: string): boolean {
  const database = join(dataDir, 'turfnote.sqlite')
  return existsSync(database) && Date.now() - statSync(database).birthtimeMs > DAY_MS
}

main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
})
