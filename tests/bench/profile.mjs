// Loaded into the built server by `BENCH_PROFILE` (see api/house.ts): node refuses --cpu-prof in NODE_OPTIONS.
import { writeFileSync } from 'node:fs'
import { Session } from 'node:inspector'

const session = new Session()
session.connect()
session.post('Profiler.enable')
session.post('Profiler.start')
process.once('exit', () => {
  session.post('Profiler.stop', (error, result) => {
    if (!error) writeFileSync(`${process.env.BENCH_PROFILE}/server-${process.pid}.cpuprofile`, JSON.stringify(result.profile))
  })
})
