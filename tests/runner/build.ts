import { buildOnce } from '#fakes/demo/build'

/** The build as a process of its own, so that the runner stays free to end it. */
try {
  buildOnce()
}
catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
}
