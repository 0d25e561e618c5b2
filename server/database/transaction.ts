import { AsyncLocalStorage } from 'node:async_hooks'
import { performance } from 'node:perf_hooks'
import type { KyselyPlugin } from 'kysely'
import type { Database } from './client'

/** The outer handle was used inside a transaction: on one connection that would wait for itself for ever. */
export class OuterHandleUsed extends Error {
  override name = 'OuterHandleUsed'
  constructor() {
    super('The outer database handle was used inside a transaction. Use the handle that inTransaction gives.')
  }
}

/** The work inside a transaction waited for something other than the database, and everybody else waited with it. */
export class EventLoopTurned extends Error {
  override name = 'EventLoopTurned'
  constructor() {
    super('The event loop turned inside a transaction. Do outside work before or after it, never within.')
  }
}

const running = new AsyncLocalStorage<true>()

/** A plugin of the outer handle alone: `inTransaction` takes it off the handle that it passes on. */
export const outerHandleGuard: KyselyPlugin = {
  transformQuery({ node }) {
    if (running.getStore()) throw new OuterHandleUsed()
    return node
  },
  async transformResult({ result }) {
    return result
  },
}

/**
 * Runs `work` in one transaction and commits it; any error rolls back and is thrown on.
 * Name the parameter `db`, so that it shadows the outer handle.
 *
 * @throws OuterHandleUsed when the outer handle is used inside, also by a nested call.
 * @throws EventLoopTurned when `work` waited for a timer, the network or a file.
 */
export async function inTransaction<T>(db: Database, work: (db: Database) => Promise<T>): Promise<T> {
  if (running.getStore() || db.isTransaction) throw new OuterHandleUsed()
  return db.transaction().execute(transaction => running.run(true, async () => {
    const hasTurned = watchEventLoop()
    try {
      const result = await work(transaction.withoutPlugins())
      if (hasTurned()) throw new EventLoopTurned()
      return result
    }
    finally {
      hasTurned.stop()
    }
  }))
}

/**
 * Tells whether the event loop has turned since the call. Three signs, since each alone can miss a turn:
 * an immediate that ran, the loop's own count, and its count of handled events.
 */
function watchEventLoop() {
  let immediateRan = false
  const immediate = setImmediate(() => {
    immediateRan = true
  })
  const before = performance.nodeTiming.uvMetricsInfo
  function hasTurned(): boolean {
    const now = performance.nodeTiming.uvMetricsInfo
    return immediateRan || now.loopCount !== before.loopCount || now.events !== before.events
  }
  hasTurned.stop = () => clearImmediate(immediate)
  return hasTurned
}
