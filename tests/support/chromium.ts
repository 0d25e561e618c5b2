import { spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'

/** Drawing without a screen, in a container, and without asking its maker anything. */
export const CHROMIUM_FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
]

const USUAL_PLACES = [
  '/usr/bin/chromium',
  '/usr/bin/chromium-browser',
  '/usr/bin/google-chrome-stable',
  '/usr/bin/google-chrome',
  '/snap/bin/chromium',
  '/Applications/Chromium.app/Contents/MacOS/Chromium',
  '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
]

const APT_GET = '/usr/bin/apt-get'
const DEBIAN_CHROMIUM = '/usr/bin/chromium'

/** What the search asks of the machine. */
export interface Machine {
  environment: Record<string, string | undefined>
  isRoot: boolean
  exists(path: string): boolean
  /** @returns whether the program ended well. */
  run(program: string, programArguments: string[]): boolean
}

/**
 * The path of a Chromium: `CHROMIUM_PATH`, else the usual places, else Debian's package when this may install it.
 * @throws with what to do when there is none.
 */
export function findChromium(machine: Machine = thisMachine()): string {
  const told = machine.environment.CHROMIUM_PATH
  if (told) {
    if (machine.exists(told)) return told
    throw new Error(`CHROMIUM_PATH is ${told}, and nothing is there. Point it at a Chromium or Chrome, or unset it.`)
  }
  const found = USUAL_PLACES.find(path => machine.exists(path))
  if (found) return found
  if (machine.isRoot && machine.exists(APT_GET)) return installChromium(machine)
  throw new Error(`The browser tests need Chromium and found none in:\n${USUAL_PLACES.map(path => `  ${path}`).join('\n')}\n`
    + 'On Debian or Ubuntu: sudo apt-get install chromium. Elsewhere install Chromium or Chrome, or set CHROMIUM_PATH to its program.')
}

function installChromium(machine: Machine): string {
  const isInstalled = machine.run(APT_GET, ['update'])
    && machine.run(APT_GET, ['install', '--yes', '--no-install-recommends', 'chromium'])
  if (isInstalled && machine.exists(DEBIAN_CHROMIUM)) return DEBIAN_CHROMIUM
  throw new Error('The browser tests need Chromium, and apt-get could not install it. Run: apt-get update && apt-get install chromium')
}

function thisMachine(): Machine {
  return {
    environment: process.env,
    isRoot: process.getuid?.() === 0,
    exists: existsSync,
    run(program, programArguments) {
      const { status } = spawnSync(program, programArguments, {
        stdio: ['ignore', 'ignore', 'inherit'],
        env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
      })
      return status === 0
    },
  }
}
