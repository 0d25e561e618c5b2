import { z } from 'zod'
import { startPayments } from './server'

const settingsSchema = z.object({
  STRIPE_SECRET_KEY: z.string().min(1),
  STRIPE_WEBHOOK_SECRET: z.string().min(1),
  STRIPE_API_BASE: z.url(),
  APP_URL: z.url(),
  FAKE_PAYMENTS_STATE: z.string().min(1).optional(),
})

const settings = settingsSchema.safeParse(process.env)
if (!settings.success) {
  process.stderr.write(`payments stand-in cannot start:\n${z.prettifyError(settings.error)}\n`)
  process.exit(1)
}

const webhookUrl = `${settings.data.APP_URL.replace(/\/$/, '')}/webhooks/stripe`
const payments = await startPayments({
  port: Number(new URL(settings.data.STRIPE_API_BASE).port),
  statePath: settings.data.FAKE_PAYMENTS_STATE,
  secretKey: settings.data.STRIPE_SECRET_KEY,
  webhookSecret: settings.data.STRIPE_WEBHOOK_SECRET,
  webhookUrl,
})
process.stdout.write(`payments stand-in on ${payments.url}, events to ${webhookUrl}\n`)

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => void payments.close().then(() => process.exit(0)))
}
