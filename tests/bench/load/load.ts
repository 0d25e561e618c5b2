import { endChild, nextMessage, startChild } from './child'
import type { LoadJob, LoadResult } from './job'
import { loadResultSchema } from './job'

export interface Load {
  /** @throws when an answer has another status than the job expects: a rate of refusals is no rate. */
  run(job: LoadJob): Promise<LoadResult>
  close(): Promise<void>
}

export function startLoad(): Load {
  const child = startChild('tests/bench/load/generator.ts')
  return {
    async run(job) {
      child.send(job)
      const result = loadResultSchema.parse(await nextMessage(child, job.limitMs + 30_000))
      if (result.unexpected.length > 0) throw new Error(`Not every answer was ${job.expectedStatus}:\n${result.unexpected.join('\n')}`)
      if (job.order === 'once' && result.answered !== job.requests.length) {
        throw new Error(`Only ${result.answered} of ${job.requests.length} requests were answered within ${job.limitMs} ms.`)
      }
      return result
    },
    close: () => endChild(child),
  }
}

export function ratePerSecond(result: LoadResult): number {
  return result.answered / result.seconds
}
