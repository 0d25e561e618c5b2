import { performance } from 'node:perf_hooks'
import { LoadConnection, requestBytes } from './connection'
import type { LoadJob, LoadResult } from './job'
import { jobSchema } from './job'

const MAX_TOLD = 3

/** A process of its own, so that making the load and answering it do not share a thread. Takes jobs from its parent, one at a time. */
process.on('message', (message) => {
  runJob(jobSchema.parse(message)).then(result => process.send?.(result), (error: unknown) => {
    console.error(error)
    process.exit(1)
  })
})

async function runJob(job: LoadJob): Promise<LoadResult> {
  const requests = job.requests.map(request => requestBytes(request, job.port))
  const connections = await Promise.all(Array.from({ length: job.connections }, () => LoadConnection.open(job.port)))
  const tookMs: number[] = []
  const unexpected: string[] = []
  let next = 0
  const startedCpu = process.cpuUsage()
  const startedAt = performance.now()
  const deadline = startedAt + job.limitMs

  async function work(connection: LoadConnection): Promise<void> {
    while (performance.now() < deadline) {
      const bytes = requests[job.order === 'again' ? next % requests.length : next]
      next += 1
      if (!bytes) return
      const sentAt = performance.now()
      const answer = await connection.send(bytes)
      tookMs.push(performance.now() - sentAt)
      if (answer.status !== job.expectedStatus && unexpected.length < MAX_TOLD) unexpected.push(`${answer.status} ${answer.body}`)
    }
  }
  await Promise.all(connections.map(work))
  const seconds = (performance.now() - startedAt) / 1000
  const cpu = process.cpuUsage(startedCpu)
  connections.forEach(connection => connection.close())
  tookMs.sort((a, b) => a - b)
  return {
    answered: tookMs.length,
    seconds,
    p50Ms: tookMs[Math.floor(tookMs.length * 0.5)] ?? 0,
    p99Ms: tookMs[Math.floor(tookMs.length * 0.99)] ?? 0,
    generatorBusy: (cpu.user + cpu.system) / 1e6 / seconds,
    unexpected,
  }
}
