import { config, RouterLinkStub } from '@vue/test-utils'

// Outside Nuxt nobody registers it, and every button may be a link.
config.global.stubs = { ...config.global.stubs, NuxtLink: RouterLinkStub }
