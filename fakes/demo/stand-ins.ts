import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { startMail } from '#fakes/mail/server'
import { startPayments } from '#fakes/payments/server'
import { startStorage } from '#fakes/storage/server'
import type { Addresses } from './addresses'
import { localAddress } from './addresses'
import { ACCESS_KEY, BUCKET, REGION, SECRET_KEY, STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET } from './environment'

export interface StandIns {
  storageUrl: string
  paymentsUrl: string
  inboxUrl: string
  close(): Promise<void>
}

/** Starts the store, the card provider and the mail server; what they keep lies under `dataDir`. */
export async function startStandIns(addresses: Addresses, dataDir: string): Promise<StandIns> {
  mkdirSync(dataDir, { recursive: true })
  const storage = await startStorage({
    port: addresses.storagePort,
    dataDir: join(dataDir, 'store'),
    bucket: BUCKET,
    region: REGION,
    accessKey: ACCESS_KEY,
    secretKey: SECRET_KEY,
    allowedOrigins: [localAddress(addresses.appPort)],
  })
  const payments = await startPayments({
    port: addresses.paymentsPort,
    statePath: join(dataDir, 'payments.json'),
    secretKey: STRIPE_SECRET_KEY,
    webhookSecret: STRIPE_WEBHOOK_SECRET,
    webhookUrl: `${localAddress(addresses.appPort)}/webhooks/stripe`,
  })
  const mail = await startMail({ smtpPort: addresses.smtpPort, inboxPort: addresses.inboxPort, statePath: join(dataDir, 'mail.json') })
  return {
    storageUrl: storage.url,
    paymentsUrl: payments.url,
    inboxUrl: mail.inboxUrl,
    async close() {
      await Promise.all([storage.close(), payments.close(), mail.close()])
    },
  }
}
