import process from 'node:process'
import { z } from 'zod'
import { startStorage } from './server'

/** The same settings the product reads, so that one file of settings serves both. */
const settingsSchema = z.object({
  STORAGE_ENDPOINT: z.url({ protocol: /^http$/, error: 'an address such as http://127.0.0.1:9000' }),
  STORAGE_REGION: z.string().min(1),
  STORAGE_BUCKET: z.string().min(1),
  STORAGE_ACCESS_KEY: z.string().min(1),
  STORAGE_SECRET_KEY: z.string().min(1),
  FAKE_STORAGE_DIR: z.string().min(1),
  /** Comma-separated; every origin when left out. */
  FAKE_STORAGE_ORIGINS: z.string().min(1).optional(),
})

const settings = settingsSchema.safeParse(process.env)
if (!settings.success) {
  console.error(`The storage stand-in cannot start:\n${z.prettifyError(settings.error)}`)
  process.exit(1)
}
const env = settings.data

const storage = await startStorage({
  port: Number(new URL(env.STORAGE_ENDPOINT).port || 80),
  dataDir: env.FAKE_STORAGE_DIR,
  bucket: env.STORAGE_BUCKET,
  region: env.STORAGE_REGION,
  accessKey: env.STORAGE_ACCESS_KEY,
  secretKey: env.STORAGE_SECRET_KEY,
  allowedOrigins: env.FAKE_STORAGE_ORIGINS?.split(',').map(origin => origin.trim()) ?? '*',
})
console.log(`storage stand-in listening on ${storage.url}, bucket ${env.STORAGE_BUCKET}`)

for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.once(signal, () => void storage.close().then(() => process.exit(0)))
}
