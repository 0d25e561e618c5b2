import { runningApp } from '../running'

/** Film and pictures come straight from the store, whose address is a setting: the content policy must name it. */
export default defineNitroPlugin((nitroApp) => {
  nitroApp.hooks.hook('nuxt-security:routeRules', (routeRules) => {
    const { origin } = new URL(runningApp().settings.storage.endpoint)
    const rule = routeRules['/**'] ??= {}
    const headers = rule.headers ||= {}
    const policy = headers.contentSecurityPolicy ||= {}
    for (const directive of ['connect-src', 'img-src', 'media-src'] as const) {
      const sources = policy[directive]
      policy[directive] = [...(Array.isArray(sources) ? sources : ['\'self\'']), origin]
    }
  })
})
