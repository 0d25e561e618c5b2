import type { App } from '#server/app'
import { jobContext } from '#server/context'
import type { Ctx } from '#server/context'
import { readWaitingClips } from '#server/features/film/film.jobs'
import { sweepFilm } from '#server/features/film/sweep/sweep.service'
import { sendDueLetters } from '#server/features/mail/outbox.service'
import { giveMoneyBack } from '#server/features/money/refund.jobs'
import { settleOpenOrders } from '#server/features/money/settle.service'
import { tidyPeople } from '#server/features/people/people.jobs'

/** Work that may run twice without harm, poked after a commit and by schedule. */
const JOBS = {
  'mail:send': sendDueLetters,
  'film:read': readWaitingClips,
  'film:sweep': sweepFilm,
  'money:settle': settleOpenOrders,
  'money:refund': giveMoneyBack,
  'people:tidy': tidyPeople,
} as const satisfies Record<string, (ctx: Ctx) => Promise<void>>

export type JobName = keyof typeof JOBS

export interface Jobs {
  /** Runs the job soon; several pokes while it runs make one more run. Never throws. */
  poke(name: JobName): void
  /** Runs the job now and waits for it. */
  run(name: JobName): Promise<void>
}

/** One job of a name at a time in this process; between processes the leases in the tables keep order. */
export function createJobs(app: () => App): Jobs {
  const running = new Map<JobName, Promise<void>>()
  const again = new Set<JobName>()

  async function runAll(name: JobName): Promise<void> {
    do {
      again.delete(name)
      await JOBS[name](jobContext(app(), name))
    } while (again.has(name))
  }

  function run(name: JobName): Promise<void> {
    const known = running.get(name)
    if (known) {
      again.add(name)
      return known
    }
    const started = runAll(name).finally(() => running.delete(name))
    running.set(name, started)
    return started
  }

  return {
    run,
    poke(name) {
      setImmediate(() => {
        run(name).catch(error => app().log.error({ job: name, err: error }, 'job failed'))
      })
    },
  }
}
