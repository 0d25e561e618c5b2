import type { BenchRow, Pair } from '../bench'
import { rowFrom } from '../bench'
import type { Load, Measured } from '../load/load'
import { ratePerSecond } from '../load/load'
import type { LoadRequest } from '../load/job'
import { describeRun } from './describe'
import type { Server } from './house'
import { openHouse } from './house'

const RUNS = 5
const CONNECTIONS = 32
const RUN_MS = 3000
const WARM_UP_MS = 1500
/** A full page and more after it. */
const OPEN_REVIEWS = 60
const AIM = 0.5

/** A coach's first page of the queue, against a bare handler that reads the same rows. */
export async function measureQueue(load: Load, tell: (line: string) => void): Promise<BenchRow[]> {
  const house = await openHouse(OPEN_REVIEWS)
  try {
    const queue = house.request('GET', '/api/desk/queue?limit=25')
    const bare: LoadRequest = { method: 'GET', path: '/rows', headers: { accept: 'application/json' }, body: '' }
    const run = ({ port, pid }: Server, request: LoadRequest, limitMs: number): Promise<Measured> =>
      load.run({ port, connections: CONNECTIONS, requests: [request], order: 'again', limitMs, expectedStatus: 200 }, pid)

    await run(house.yardstick, bare, WARM_UP_MS)
    await run(house.app, queue, WARM_UP_MS)
    const pairs: Pair[] = []
    for (let index = 0; index < RUNS; index += 1) {
      const yardstick = await run(house.yardstick, bare, RUN_MS)
      const measured = await run(house.app, queue, RUN_MS)
      tell(describeRun('queue page', measured, yardstick))
      pairs.push({ value: ratePerSecond(measured), yardstick: ratePerSecond(yardstick) })
    }
    return [rowFrom('queue page, 25 rows, 32 connections', 'per second', pairs, AIM)]
  }
  finally {
    await house.close()
  }
}
