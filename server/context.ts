import type { Role } from '#shared/types/people'
import type { App } from './app'
import type { JobName } from './features/jobs/jobs'
import type { RepeatableRequest } from './write'

/** Who asks: as much of the person as access rules need. */
export interface ViewerFacts {
  id: string
  role: Role
  isCoach: boolean
  sessionId: string
}

/** What a service gets: the outside world, the moment, and who asks. `viewer` is undefined for a visitor. */
export interface Ctx extends Pick<App, 'db' | 'writeCount' | 'storage' | 'payments' | 'mail' | 'limits' | 'log' | 'settings'> {
  viewer: ViewerFacts | undefined
  nowMs: number
  requestId: string
  /** Set for a POST that came with an Idempotency-Key; see `write`. */
  repeatable?: RepeatableRequest
  /** Jobs to run once the write is committed. */
  pokesAfterWrite: Set<JobName>
  poke(job: JobName): void
}

/** A context in which somebody is signed in. */
export interface SignedInCtx extends Ctx {
  viewer: ViewerFacts
}

/** A context for work that no request started. */
export function jobContext(app: App, name: string): Ctx {
  return contextOf(app, { viewer: undefined, requestId: `job-${name}` })
}

export function contextOf(app: App, request: Pick<Ctx, 'viewer' | 'requestId' | 'repeatable'>): Ctx {
  const { db, writeCount, storage, payments, mail, limits, log, settings, clock, jobs } = app
  return {
    db, writeCount, storage, payments, mail, limits, log, settings,
    nowMs: clock.nowMs(),
    pokesAfterWrite: new Set(),
    poke: job => jobs.poke(job),
    ...request,
  }
}
