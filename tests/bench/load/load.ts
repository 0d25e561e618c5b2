import { endChild, nextMessage, startChild } from './child'
import { cpuMsOf } from './cpu'
import type { LoadJob, LoadResult } from './job'
import { loadResultSchema } from './job'

export interface Measured extends LoadResult {
  /** What one answer cost the server in computing; undefined where the system does not tell. */
  serverMsEach: number | undefined
}

export interface Load {
  /** @throws when an answer has another status than the job expects: a rate of refusals is no rate. */
  run(job: LoadJob, serverPid: number): Promise<Measured>
  close(): Promise<void>
}

export function startLoad(): Load {
  const child = startChild('tests/bench/load/generator.ts')
  return {
    async run(job, serverPid) {
      const before = cpuMsOf(serverPid)
      child.send(job)
      const result = loadResultSchema.parse(await nextMessage(child, job.limitMs + 30_000))
      if (result.unexpected.length > 0) throw new Error(`Not every answer was ${job.expectedStatus}:\n${result.unexpected.join('\n')}`)
      if (job.order === 'once' && result.answered !== job.requests.length) {
        throw new Error(`Only ${result.answered} of ${job.requests.length} requests were answered within ${job.limitMs} ms.`)
      }
      const after = cpuMsOf(serverPid)
      return { ...result, serverMsEach: before === undefined || after === undefined ? undefined : (after - before) / result.answered }
    },
    close: () => endChild(child),
  }
}

export function ratePerSecond(result: LoadResult): number {
  return result.answered / result.seconds
}
