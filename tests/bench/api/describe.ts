import type { Measured } from '../load/load'
import { ratePerSecond } from '../load/load'

/** Above this the generator may be what limits the rate, and the figure says little about the server. */
const TOO_BUSY = 0.9

/** One run in a line: rates, how long an answer took, and whether making the load was the limit. */
export function describeRun(name: string, measured: Measured, yardstick: Measured): string {
  const ratio = ratePerSecond(measured) / ratePerSecond(yardstick)
  const busy = Math.max(measured.generatorBusy, yardstick.generatorBusy)
  const notes = [
    `p50 ${measured.p50Ms.toFixed(1)} ms, p99 ${measured.p99Ms.toFixed(1)} ms`,
    `computing ${each(measured)} against ${each(yardstick)} each`,
    ...busy > TOO_BUSY ? [`making the load takes ${Math.round(busy * 100)} % of a core: it may be the limit`] : [],
  ]
  return `${name.padEnd(12)}${rate(measured)}  against ${rate(yardstick)}  = ${ratio.toFixed(2)}   (${notes.join('; ')})`
}

function rate(result: Measured): string {
  return `${Math.round(ratePerSecond(result))}/s`.padStart(8)
}

function each({ serverMsEach }: Measured): string {
  return serverMsEach === undefined ? '?' : `${serverMsEach.toFixed(2)} ms`
}
