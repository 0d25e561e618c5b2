import { dirname, join, resolve } from 'node:path'
import { z } from 'zod'

const address = z.url({ protocol: /^https?$/ }).transform(value => value.replace(/\/+$/, ''))

const flag = z.enum(['true', 'false']).default('false').transform(value => value === 'true')

const environmentSchema = z.object({
  APP_URL: address,
  HOST: z.string().min(1).default('127.0.0.1'),
  PORT: z.coerce.number().int().min(1).max(65535).default(3000),
  DATABASE_PATH: z.string().min(1),
  NUXT_SESSION_PASSWORD: z.string().min(32, 'needs 32 characters or more'),
  TRUSTED_PROXY: flag,
  STORAGE_ENDPOINT: address,
  STORAGE_REGION: z.string().min(1),
  STORAGE_BUCKET: z.string().min(3),
  STORAGE_ACCESS_KEY: z.string().min(1),
  STORAGE_SECRET_KEY: z.string().min(1),
  STRIPE_SECRET_KEY: z.string().min(1),
  STRIPE_WEBHOOK_SECRET: z.string().startsWith('whsec_', 'begins with whsec_'),
  STRIPE_API_BASE: address.optional(),
  SMTP_URL: z.url({ protocol: /^smtps?$/ }),
  MAIL_FROM: z.string().regex(/@/, 'needs an address, such as Turfnote <post@example.org>'),
  LIMITS_DATABASE_PATH: z.string().min(1).optional(),
  LIMITS_FACTOR: z.coerce.number().positive().default(1),
  FILM_READER_PATH: z.string().min(1).optional(),
  FFMPEG_PATH: z.string().min(1).optional(),
  CLOCK_OFFSET_FILE: z.string().min(1).optional(),
  LOG_LEVEL: z.enum(['debug', 'info', 'warn', 'error', 'silent']).default('info'),
})

export interface Settings {
  appUrl: string
  host: string
  port: number
  databasePath: string
  /** Rate limits live in a file of their own: on the shared handle they would write into whatever transaction is open. */
  limitsDatabasePath: string
  /** Multiplies every allowance; 1 but for load tests. */
  limitsFactor: number
  sessionPassword: string
  isBehindTrustedProxy: boolean
  storage: { endpoint: string, region: string, bucket: string, accessKey: string, secretKey: string }
  payments: { secretKey: string, webhookSecret: string, apiBase: string | undefined }
  mail: { smtpUrl: string, from: string }
  /** The worker that reads film; beside the built server unless said. */
  filmReaderPath: string
  /** Converts film that browsers cannot show; such film is refused when there is none. */
  ffmpegPath: string | undefined
  /** A file holding milliseconds by which the clock runs ahead; for rehearsals and tests. */
  clockOffsetFile: string | undefined
  logLevel: string
}

/** One or more settings are missing or malformed; the message names each. */
export class BadSettings extends Error {
  override name = 'BadSettings'
  constructor(readonly problems: string[]) {
    super(`Turfnote cannot start. Settings to mend (see .env.example):\n${problems.map(problem => `  ${problem}`).join('\n')}`)
  }
}

/**
 * Reads every setting from `environment` at once, so that one start names all that is wrong.
 * @throws BadSettings
 */
export function readSettings(environment: Record<string, string | undefined>, programPath: string): Settings {
  // An empty line in an environment file means "not set".
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== undefined && value !== ''))
  const parsed = environmentSchema.safeParse(given)
  if (!parsed.success) {
    throw new BadSettings(parsed.error.issues.map((issue) => {
      const name = String(issue.path[0])
      return name in given ? `${name}: ${issue.message}` : `${name}: missing`
    }))
  }
  const env = parsed.data
  return {
    appUrl: env.APP_URL,
    host: env.HOST,
    port: env.PORT,
    databasePath: env.DATABASE_PATH,
    limitsDatabasePath: env.LIMITS_DATABASE_PATH ?? besideDatabase(env.DATABASE_PATH),
    limitsFactor: env.LIMITS_FACTOR,
    sessionPassword: env.NUXT_SESSION_PASSWORD,
    isBehindTrustedProxy: env.TRUSTED_PROXY,
    storage: {
      endpoint: env.STORAGE_ENDPOINT,
      region: env.STORAGE_REGION,
      bucket: env.STORAGE_BUCKET,
      accessKey: env.STORAGE_ACCESS_KEY,
      secretKey: env.STORAGE_SECRET_KEY,
    },
    payments: { secretKey: env.STRIPE_SECRET_KEY, webhookSecret: env.STRIPE_WEBHOOK_SECRET, apiBase: env.STRIPE_API_BASE },
    mail: { smtpUrl: env.SMTP_URL, from: env.MAIL_FROM },
    filmReaderPath: resolve(env.FILM_READER_PATH ?? join(dirname(programPath), 'workers', 'film-reader.mjs')),
    ffmpegPath: env.FFMPEG_PATH,
    clockOffsetFile: env.CLOCK_OFFSET_FILE,
    logLevel: env.LOG_LEVEL,
  }
}

function besideDatabase(path: string): string {
  return path === ':memory:' ? path : join(dirname(path), 'limits.sqlite')
}
