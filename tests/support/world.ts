import { copyFileSync, existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import type { RunningApp } from '#fakes/demo/app-process'
import { startBuiltApp } from '#fakes/demo/app-process'
import type { Addresses } from '#fakes/demo/addresses'
import { addressesFrom } from '#fakes/demo/addresses'
import { appEnvironment } from '#fakes/demo/environment'
import type { DemoKey } from '#fakes/demo/people'
import type { StandIns } from '#fakes/demo/stand-ins'
import { startStandIns } from '#fakes/demo/stand-ins'
import { TEMPLATE_DIR } from './template'

/** One server with its own database and stand-ins, on ports of its own. */
export interface World {
  url: string
  addresses: Addresses
  dataDir: string
  app: RunningApp
  standIns: StandIns
  environment: Record<string, string>
  /** The session cookie of one of the demo's people, as a `Cookie` header. */
  cookie(key: DemoKey): string
  /** Moves the server's clock to this many milliseconds ahead of the machine's. */
  moveClock(offsetMs: number): void
  /** Ends the server, hard when told, and starts it again on the same data. */
  restart(options?: { signal?: NodeJS.Signals }): Promise<void>
  close(): Promise<void>
}

export interface WorldOptions {
  /** Two worlds at once need two numbers, 0 to 49. */
  index: number
  environment?: Record<string, string>
}

const FIRST_APP_PORT = 4300
const FIRST_FAKES_PORT = 4400

/** Starts a world on a copy of the template: an invented studio with people, hours, offers and credits, and no reviews. */
export async function startWorld({ index, environment: extra = {} }: WorldOptions): Promise<World> {
  const addresses = addressesFrom(FIRST_APP_PORT + index, FIRST_FAKES_PORT + index * 50)
  const dataDir = join('.test', `world-${index}`)
  rmSync(dataDir, { recursive: true, force: true })
  mkdirSync(dataDir, { recursive: true })
  copyFileSync(join(TEMPLATE_DIR, 'turfnote.sqlite'), join(dataDir, 'turfnote.sqlite'))
  const cookies = readCookies(join(TEMPLATE_DIR, 'cookies.json'))
  const clockFile = join(dataDir, 'clock')
  const standIns = await startStandIns(addresses, dataDir)
  const environment: Record<string, string> = {
    ...appEnvironment(addresses, dataDir),
    // One name for every world, so that the template's cookies hold everywhere.
    NUXT_SESSION_NAME: '__Host-turfnote-test',
    CLOCK_OFFSET_FILE: clockFile,
    LIMITS_FACTOR: '1000',
    ...extra,
  }
  const world: World = {
    url: environment.APP_URL ?? '',
    addresses,
    dataDir,
    app: await startBuiltApp(environment, { isQuiet: true }),
    standIns,
    environment,
    cookie(key) {
      return cookies[key] ?? ''
    },
    moveClock: offsetMs => writeFileSync(clockFile, String(offsetMs)),
    async restart({ signal } = {}) {
      await world.app.stop(signal)
      world.app = await startBuiltApp(environment, { isQuiet: true })
    },
    async close() {
      await world.app.stop()
      await standIns.close()
    },
  }
  return world
}

function readCookies(path: string): Record<string, string> {
  if (!existsSync(path)) throw new Error(`${path} is missing: the template was not made (tests/support/once.ts).`)
  const parsed: unknown = JSON.parse(readFileSync(path, 'utf8'))
  if (typeof parsed !== 'object' || parsed === null) return {}
  return Object.fromEntries(Object.entries(parsed).map(([key, value]) => [key, String(value)]))
}
