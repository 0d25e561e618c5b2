import SQLite from 'better-sqlite3'
import { RateLimiterRes, RateLimiterSQLite } from 'rate-limiter-flexible'
import { Refusal } from './refusal'

/**
 * How often a deed may be tried, `allowed` times in `seconds`. Guessing is slowed per account and per address apart,
 * so that a stranger who guesses at an account does not lock its owner out of another network.
 */
const ALLOWANCES = {
  'sign-in-address': { allowed: 30, seconds: 600 },
  'sign-in-account-address': { allowed: 8, seconds: 600 },
  'sign-up-address': { allowed: 10, seconds: 3600 },
  'forgot-address': { allowed: 10, seconds: 3600 },
  'mail-account': { allowed: 5, seconds: 3600 },
  'password-account': { allowed: 10, seconds: 600 },
  'link-address': { allowed: 30, seconds: 600 },
  'upload-account': { allowed: 40, seconds: 3600 },
  'picture-account': { allowed: 20, seconds: 3600 },
  'photo-account': { allowed: 40, seconds: 3600 },
} as const satisfies Record<string, { allowed: number, seconds: number }>

export type LimitName = keyof typeof ALLOWANCES

export interface Limits {
  /** Counts one try. @throws Refusal `too-many`, with the seconds to wait. */
  take(name: LimitName, who: string): Promise<void>
  close(): void
}

/** Opens the limiter's own file; counts survive a restart. `factor` multiplies every allowance. */
export function openLimits(path: string, factor: number): Limits {
  const handle = new SQLite(path)
  // A count lost in a power cut costs nothing, so it need not wait for the disk.
  handle.pragma('journal_mode = WAL')
  handle.pragma('synchronous = OFF')
  const limiters = new Map<LimitName, RateLimiterSQLite>()
  // The limiter makes its table by itself and too late for whoever asks at once.
  handle.exec('create table if not exists limits (key text primary key, points integer not null default 0, expire integer)')

  function limiterFor(name: LimitName): RateLimiterSQLite {
    const known = limiters.get(name)
    if (known) return known
    const { allowed, seconds } = ALLOWANCES[name]
    const limiter = new RateLimiterSQLite({
      storeClient: handle,
      storeType: 'better-sqlite3',
      tableName: 'limits',
      tableCreated: true,
      keyPrefix: name,
      points: Math.ceil(allowed * factor),
      duration: seconds,
    })
    limiters.set(name, limiter)
    return limiter
  }

  return {
    async take(name, who) {
      try {
        await limiterFor(name).consume(who)
      }
      catch (error) {
        if (error instanceof RateLimiterRes) throw tooMany(Math.ceil(error.msBeforeNext / 1000))
        throw error
      }
    },
    close: () => handle.close(),
  }
}

function tooMany(seconds: number): Refusal {
  const wait = seconds < 90 ? `${seconds} seconds` : `${Math.ceil(seconds / 60)} minutes`
  return new Refusal('too-many', 'too-many-tries', `That was tried too often. Wait ${wait}, then try again.`, undefined, seconds)
}
