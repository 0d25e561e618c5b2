import manifest from '../package.json'

/** As the package says. */
export const version = manifest.version
