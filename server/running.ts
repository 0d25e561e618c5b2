import type { App } from './app'

let app: App | undefined

/** Set once by the start plugin. */
export function setRunningApp(started: App): void {
  app = started
}

/** @throws when called before the start plugin ran: a fault of ours. */
export function runningApp(): App {
  if (!app) throw new Error('The app has not been started.')
  return app
}
