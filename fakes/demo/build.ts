import { spawnSync } from 'node:child_process'
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'

const SOURCES = ['app', 'server', 'shared', 'public', 'nuxt.config.ts', 'tailwind.config.ts', 'package-lock.json']
const STAMP = '.output/.built-from'

const LOCK = '.nuxt/.turfnote-building'
const LOCK_IS_DEAD_AFTER_MS = 5 * 60 * 1000

/** Builds the app unless `.output` holds a build of exactly these sources; one build at a time. @throws when the build fails. */
export function buildOnce(): void {
  takeLock()
  try {
    buildIfNeeded()
  }
  finally {
    rmSync(LOCK, { recursive: true, force: true })
  }
}

function buildIfNeeded(): void {
  const stamp = newestChange()
  if (existsSync(STAMP) && readFileSync(STAMP, 'utf8') === stamp) return
  console.log('Building (about half a minute) …')
  const built = spawnSync('npx', ['nuxt', 'build'], { encoding: 'utf8', env: { ...process.env, NODE_ENV: 'production' } })
  if (built.status !== 0) throw new Error(`The build failed.\n${built.stdout}\n${built.stderr}`)
  writeFileSync(STAMP, stamp)
}

/** A folder can be made by one process only; a second builder waits for the first and then finds its build. */
function takeLock(): void {
  mkdirSync('.nuxt', { recursive: true })
  for (;;) {
    try {
      mkdirSync(LOCK)
      return
    }
    catch {
      const isDead = existsSync(LOCK) && Date.now() - statSync(LOCK).mtimeMs > LOCK_IS_DEAD_AFTER_MS
      if (isDead) rmSync(LOCK, { recursive: true, force: true })
      Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 250)
    }
  }
}

/** Number of files and the newest change among them: enough to tell one checkout's states apart. */
function newestChange(): string {
  let count = 0
  let newestMs = 0
  const visit = (path: string): void => {
    const stats = statSync(path)
    if (stats.isDirectory()) {
      for (const name of readdirSync(path)) visit(join(path, name))
      return
    }
    count += 1
    newestMs = Math.max(newestMs, stats.mtimeMs)
  }
  SOURCES.forEach(visit)
  return `${count} files, ${newestMs}`
}
