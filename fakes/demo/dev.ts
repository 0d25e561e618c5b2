import { spawn } from 'node:child_process'
import { existsSync, mkdirSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { buildFilmWorker } from '#server/features/film/reading/build-worker'
import { readAddresses } from './addresses'
import { appEnvironment } from './environment'
import { seedDemo } from './seed'
import { startStandIns } from './stand-ins'

/** `npm run dev`: the app with hot reload, on the stand-ins, with data of its own in `.demo/dev`. */
async function main(): Promise<void> {
  const addresses = readAddresses(process.env)
  const dataDir = join('.demo', 'dev')
  mkdirSync(dataDir, { recursive: true })
  const filmReaderPath = resolve('.nuxt/workers/film-reader.mjs')
  mkdirSync(resolve('.nuxt/workers'), { recursive: true })
  await buildFilmWorker(filmReaderPath)
  const environment = { ...appEnvironment(addresses, dataDir), FILM_READER_PATH: filmReaderPath }

  const standIns = await startStandIns(addresses, dataDir)
  if (!existsSync(join(dataDir, 'turfnote.sqlite'))) {
    // Film is read by the worker alone, so making the studio needs no build of the app.
    console.log('Making the studio …')
    await seedDemo(environment)
  }
  console.log(`Inbox ${standIns.inboxUrl}`)
  const child = spawn('npx', ['nuxt', 'dev', '--host', '127.0.0.1', '--port', String(addresses.appPort)], {
    stdio: 'inherit', env: { ...process.env, ...environment },
  })
  child.once('exit', code => void standIns.close().then(() => process.exit(code ?? 0)))
  for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => child.kill(signal))
}

main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
})
