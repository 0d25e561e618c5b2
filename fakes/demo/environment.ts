import { join } from 'node:path'
import type { Addresses } from './addresses'
import { localAddress } from './addresses'

export const REGION = 'eu-west-2'
export const BUCKET = 'turfnote-film'
export const ACCESS_KEY = 'DEMOACCESSKEY0000000'
export const SECRET_KEY = 'demo-secret-key-for-a-store-on-this-machine'
export const STRIPE_SECRET_KEY = 'sk_test_demo'
export const STRIPE_WEBHOOK_SECRET = 'whsec_demo_turfnote'

/** The settings with which the app meets the stand-ins: only addresses and keys differ from a real installation. */
export function appEnvironment(addresses: Addresses, dataDir: string): Record<string, string> {
  return {
    APP_URL: localAddress(addresses.appPort),
    HOST: '127.0.0.1',
    PORT: String(addresses.appPort),
    DATABASE_PATH: join(dataDir, 'turfnote.sqlite'),
    NUXT_SESSION_PASSWORD: 'demo-session-password-of-more-than-32-characters',
    // Cookies are shared between ports, so each demo has a name of its own.
    NUXT_SESSION_NAME: `__Host-turfnote-${addresses.appPort}`,
    STORAGE_ENDPOINT: localAddress(addresses.storagePort),
    STORAGE_REGION: REGION,
    STORAGE_BUCKET: BUCKET,
    STORAGE_ACCESS_KEY: ACCESS_KEY,
    STORAGE_SECRET_KEY: SECRET_KEY,
    STRIPE_SECRET_KEY,
    STRIPE_WEBHOOK_SECRET,
    STRIPE_API_BASE: localAddress(addresses.paymentsPort),
    SMTP_URL: `smtp://127.0.0.1:${addresses.smtpPort}`,
    MAIL_FROM: 'Fieldgate Golf <post@demo.turfnote.test>',
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true',
  }
}
