import { existsSync, readFileSync } from 'node:fs'

/** Linux counts a process's time in hundredths of a second, whatever the kernel's own tick is (proc(5), sysconf(_SC_CLK_TCK)). */
const TICK_MS = 10

/** How long a process has computed since its start, all its threads together; undefined where the system does not tell. */
export function cpuMsOf(pid: number): number | undefined {
  const path = `/proc/${pid}/stat`
  if (!existsSync(path)) return undefined
  const text = readFileSync(path, 'utf8')
  // The program's name, in brackets, may hold spaces; fields 14 and 15 are user and system time, the first after the name is field 3.
  const fields = text.slice(text.lastIndexOf(')') + 2).split(' ')
  return (Number(fields[11]) + Number(fields[12])) * TICK_MS
}
