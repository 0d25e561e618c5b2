import { mkdirSync, writeFileSync } from 'node:fs'
import { availableParallelism, loadavg } from 'node:os'
import { api } from './api'
import type { Bench } from './bench'
import { tableOf } from './bench'
import { prepare } from './prepare'

const BENCHES: Record<string, Bench> = { api, prepare }
const RESULTS_DIR = '.bench'

/** `npm run bench <name>`: a table, and the same as JSON; ends with 1 when an aim was missed. */
async function main(name: string | undefined): Promise<void> {
  const bench = name === undefined ? undefined : BENCHES[name]
  if (!bench) {
    console.log(`npm run bench <name>\n${Object.entries(BENCHES).map(([known, { about }]) => `  ${known.padEnd(8)} ${about}`).join('\n')}`)
    process.exitCode = 1
    return
  }
  const load = loadavg()[0] ?? 0
  console.log(`${bench.about}\n${availableParallelism()} cores, load ${load.toFixed(1)} before it began`)
  const rows = await bench.run(console.log)
  mkdirSync(RESULTS_DIR, { recursive: true })
  writeFileSync(`${RESULTS_DIR}/${name}.json`, `${JSON.stringify({ name, rows }, null, 2)}\n`)
  console.log(`\n${tableOf(rows)}\n`)
  if (rows.length === 0 || rows.some(row => !row.met)) process.exitCode = 1
}

main(process.argv[2]).catch((error: unknown) => {
  console.error(error)
  // At once: whatever a failed bench left open must not keep it waiting.
  process.exit(1)
})
