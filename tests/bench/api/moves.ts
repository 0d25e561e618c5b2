import type { BenchRow, Pair } from '../bench'
import { rowFrom } from '../bench'
import type { Load, Measured } from '../load/load'
import { ratePerSecond } from '../load/load'
import type { LoadRequest } from '../load/job'
import { describeRun } from './describe'
import type { Server } from './house'
import { openHouse } from './house'

const RUNS = 5
const CONNECTIONS = 16
const PER_RUN = 500
const WARM_UP = 200
const LIMIT_MS = 30_000
const AIM = 0.5

/** Taking up and answering, each against a bare handler with one durable insert. Every request is for a review of its own. */
export async function measureMoves(load: Load, tell: (line: string) => void): Promise<BenchRow[]> {
  const house = await openHouse(WARM_UP + RUNS * PER_RUN)
  try {
    const send = ({ port, pid }: Server, requests: LoadRequest[]): Promise<Measured> =>
      load.run({ port, connections: CONNECTIONS, requests, order: 'once', limitMs: LIMIT_MS, expectedStatus: 200 }, pid)
    const insert = (count: number) => send(house.yardstick, Array.from({ length: count }, bareInsert))
    const takeUp = (ids: string[]) => send(house.app, ids.map(id => house.request('POST', `/api/reviews/${id}/take-up`, {})))
    const answer = (ids: string[]) => send(house.app, ids.map(id => house.request('POST', `/api/reviews/${id}/answer`, { version: 1 })))

    const warmUp = house.reviewIds.slice(0, WARM_UP)
    await insert(WARM_UP)
    await takeUp(warmUp)
    await answer(warmUp)
    const takeUps: Pair[] = []
    const answers: Pair[] = []
    for (let index = 0; index < RUNS; index += 1) {
      const ids = house.reviewIds.slice(WARM_UP + index * PER_RUN, WARM_UP + (index + 1) * PER_RUN)
      for (const [name, move, pairs] of [['take up', takeUp, takeUps], ['answer', answer, answers]] as const) {
        await house.untilQuiet()
        const yardstick = await insert(PER_RUN)
        const measured = await move(ids)
        tell(describeRun(name, measured, yardstick))
        pairs.push({ value: ratePerSecond(measured), yardstick: ratePerSecond(yardstick) })
      }
    }
    return [
      rowFrom('take up, 16 connections', 'per second', takeUps, AIM),
      rowFrom('answer, 16 connections', 'per second', answers, AIM),
    ]
  }
  finally {
    await house.close()
  }
}

function bareInsert(): LoadRequest {
  return { method: 'POST', path: '/deeds', headers: { 'accept': 'application/json', 'content-type': 'application/json' }, body: '{}' }
}
