import { readdirSync, readFileSync } from 'node:fs'

const SAMPLE_EVERY_MS = 50

/** Bytes that the processes of one browser hold for themselves, and of those the ones that draw pages. */
export interface BrowserMemory {
  allBytes: number
  rendererBytes: number
}

/**
 * Anonymous and shared memory (RssAnon and RssShmem of /proc/<pid>/status) of every process of the browser with this profile. Files
 * that are mapped, such as the program itself, are not counted: the system can drop those.
 */
export function readMemory(profileDir: string): BrowserMemory {
  const processes = listProcesses()
  const family = new Set(processes.filter(one => one.command.includes(`--user-data-dir=${profileDir}`)).map(one => one.pid))
  for (let grown = -1; grown !== family.size;) {
    grown = family.size
    for (const { pid, parentPid } of processes) if (family.has(parentPid)) family.add(pid)
  }
  const members = processes.filter(one => family.has(one.pid))
  const sum = (list: typeof members) => list.reduce((bytes, one) => bytes + one.bytes, 0)
  return { allBytes: sum(members), rendererBytes: sum(members.filter(one => one.command.includes('--type=renderer'))) }
}

/** Samples until told to stop, and answers the highest of each over `before`. */
export function watchMemory(profileDir: string, before: BrowserMemory): { stop(): BrowserMemory } {
  const most: BrowserMemory = { ...before }
  const timer = setInterval(() => {
    const now = readMemory(profileDir)
    most.allBytes = Math.max(most.allBytes, now.allBytes)
    most.rendererBytes = Math.max(most.rendererBytes, now.rendererBytes)
  }, SAMPLE_EVERY_MS)
  return {
    stop() {
      clearInterval(timer)
      return { allBytes: most.allBytes - before.allBytes, rendererBytes: most.rendererBytes - before.rendererBytes }
    },
  }
}

interface RunningProcess {
  pid: number
  parentPid: number
  command: string
  bytes: number
}

function listProcesses(): RunningProcess[] {
  return readdirSync('/proc').filter(name => /^\d+$/.test(name)).flatMap((name) => {
    try {
      const status = readFileSync(`/proc/${name}/status`, 'utf8')
      const kilobytes = (field: string) => Number(new RegExp(`^${field}:\\s+(\\d+)`, 'm').exec(status)?.[1] ?? 0)
      return [{
        pid: Number(name),
        parentPid: kilobytes('PPid'),
        command: readFileSync(`/proc/${name}/cmdline`, 'utf8').replaceAll('\0', ' '),
        bytes: (kilobytes('RssAnon') + kilobytes('RssShmem')) * 1024,
      }]
    }
    catch {
      // Ended between the listing and the reading.
      return []
    }
  })
}
