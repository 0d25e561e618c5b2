import { createApp } from '../app'
import { setRunningApp } from '../running'
import { readSettings } from '../settings'

/**
 * Checks the settings, opens everything and brings the database up to date. Nitro does not wait for a plugin's promise and goes
 * on serving when it rejects, so the check is synchronous, requests wait for `ready`, and any failure ends the process.
 */
export default defineNitroPlugin((nitroApp) => {
  try {
    const settings = readSettings(process.env, process.argv[1] ?? '.')
    // Nitro's server listens on every interface unless it is told where.
    process.env.HOST = settings.host
    const app = createApp(settings)
    setRunningApp(app)
    app.ready.catch(stop)
    nitroApp.hooks.hook('close', () => app.close())
  }
  catch (error) {
    stop(error)
  }
})

function stop(error: unknown): never {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
}
