import { mkdir, writeFile } from 'node:fs/promises'
import { createRequire } from 'node:module'
import { fileURLToPath } from 'node:url'
import { dirname, join } from 'node:path'
import { buildFilmWorker } from './server/features/film/reading/build-worker'

/** Addresses that nuxt-auth-utils adds for itself; ours are `/api/session`. Its own DELETE takes cross-site requests. */
const MODULE_SESSION_ROUTE = '/api/_auth/session'

/** Pages keep Nuxt's own error handler; ours stands ahead of it and answers for machines. File paths, since package paths fail at start. */
const require = createRequire(import.meta.url)
const errorHandlers = [
  fileURLToPath(new URL('./server/error.ts', import.meta.url)),
  join(dirname(require.resolve('@nuxt/nitro-server')), 'runtime/handlers/error'),
]

export default defineNuxtConfig({
  modules: [
    '@pinia/nuxt',
    '@nuxtjs/tailwindcss',
    'nuxt-auth-utils',
    'nuxt-security',
    '@nuxt/eslint',
  ],

  components: [{ path: '~/components', pathPrefix: true }],
  // Data and rules are imported by name so that the linter sees every import; see DEVELOPERS.md, Imports.
  imports: { dirs: ['composables', 'stores'], scan: true },
  devtools: { enabled: false },

  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      title: 'Turfnote',
      meta: [
        { name: 'viewport', content: 'width=device-width, initial-scale=1' },
        { name: 'theme-color', content: '#EFF3F3' },
      ],
      link: [{ rel: 'icon', type: 'image/svg+xml', href: '/icon.svg' }],
    },
  },

  runtimeConfig: {
    // Name and password come from NUXT_SESSION_NAME and NUXT_SESSION_PASSWORD.
    session: {
      name: '__Host-turfnote',
      password: '',
      maxAge: 60 * 60 * 24 * 30,
      sessionHeader: false,
      cookie: { httpOnly: true, secure: true, sameSite: 'lax', path: '/' },
    },
  },

  compatibilityDate: '2026-11-01',

  nitro: {
    experimental: { tasks: true },
    scheduledTasks: { '* * * * *': ['mail:send', 'film:read', 'money:settle', 'money:refund', 'people:tidy'], '17 * * * *': ['film:sweep'] },
    errorHandler: errorHandlers,
    typescript: { tsConfig: { compilerOptions: { noUncheckedIndexedAccess: true } } },
    esbuild: { options: { target: 'node20' } },
  },

  vite: { build: { target: 'es2022' } },

  typescript: {
    strict: true,
    tsConfig: { compilerOptions: { noUncheckedIndexedAccess: true, noImplicitOverride: true } },
  },

  hooks: {
    'nitro:init'(nitro) {
      nitro.options.handlers = nitro.options.handlers.filter(handler => handler.route !== MODULE_SESSION_ROUTE)
      nitro.hooks.hook('compiled', async () => {
        const serverDir = nitro.options.output.serverDir
        await mkdir(join(serverDir, 'workers'), { recursive: true })
        await buildFilmWorker(join(serverDir, 'workers', 'film-reader.mjs'))
        // The role matrix test takes the list of routes from here: a route without a row fails it.
        const routes = [...nitro.scannedHandlers, ...nitro.options.handlers]
          .filter(handler => handler.route && !handler.middleware)
          .map(handler => ({ method: (handler.method ?? 'any').toUpperCase(), route: handler.route }))
        await writeFile(join(serverDir, 'routes.json'), `${JSON.stringify(routes, null, 2)}\n`)
      })
    },
  },
  auth: { loadStrategy: 'none' },

  eslint: {
    config: {
      standalone: true,
      stylistic: { indent: 2, quotes: 'single', semi: false, commaDangle: 'always-multiline' },
    },
  },

  security: {
    // Answers of the API need no cross-origin readers; the module's own would send `*`.
    corsHandler: false,
    // Prose with `<` is what students write; output is escaped where it is shown.
    xssValidator: false,
    // Limits are per person and per deed, in server/utils/limits.ts.
    rateLimiter: false,
    requestSizeLimiter: false,
    headers: {
      contentSecurityPolicy: {
        'default-src': ['\'self\''],
        'base-uri': ['\'none\''],
        'object-src': ['\'none\''],
        'frame-ancestors': ['\'none\''],
        'form-action': ['\'self\''],
        'script-src': ['\'self\'', '\'nonce-{{nonce}}\''],
        'style-src': ['\'self\'', '\'unsafe-inline\''],
        'font-src': ['\'self\''],
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'media-src': ['\'self\'', 'blob:'],
        'worker-src': ['\'self\'', 'blob:'],
        'connect-src': ['\'self\''],
        'upgrade-insecure-requests': false,
      },
      crossOriginEmbedderPolicy: false,
      crossOriginOpenerPolicy: 'same-origin',
      crossOriginResourcePolicy: 'same-origin',
      referrerPolicy: 'strict-origin-when-cross-origin',
      xFrameOptions: 'DENY',
      permissionsPolicy: {
        camera: ['self'],
        fullscreen: ['self'],
        geolocation: [],
        microphone: [],
        payment: [],
      },
    },
  },

  tailwindcss: { cssPath: '~/assets/main.css', viewer: false },
})
