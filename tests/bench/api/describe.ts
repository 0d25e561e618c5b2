import type { LoadResult } from '../load/job'
import { ratePerSecond } from '../load/load'

/** Above this the generator may be what limits the rate, and the figure says little about the server. */
const TOO_BUSY = 0.9

/** One run in a line: rates, how long an answer took, and whether making the load was the limit. */
export function describeRun(name: string, measured: LoadResult, yardstick: LoadResult): string {
  const ratio = ratePerSecond(measured) / ratePerSecond(yardstick)
  const busy = Math.max(measured.generatorBusy, yardstick.generatorBusy)
  return `${name.padEnd(12)}${rate(measured)}  against ${rate(yardstick)}  = ${ratio.toFixed(2)}`
    + `   (p50 ${measured.p50Ms.toFixed(1)} ms, p99 ${measured.p99Ms.toFixed(1)} ms; load takes ${percent(measured.generatorBusy)} and ${percent(yardstick.generatorBusy)} of a core`
    + `${busy > TOO_BUSY ? ': TOO MUCH, it may be the limit' : ''})`
}

function rate(result: LoadResult): string {
  return `${Math.round(ratePerSecond(result))}/s`.padStart(8)
}

function percent(share: number): string {
  return `${Math.round(share * 100)} %`
}
