import type { ChildProcess } from 'node:child_process'
import { spawn } from 'node:child_process'

export interface CommandResult {
  /** Undefined when a signal ended it. */
  code: number | undefined
  /** Both of its streams, in the order in which they came. */
  output: string
  hasTimedOut: boolean
}

const running = new Set<ChildProcess>()

/**
 * Runs `file` (one of the project's own programs) without input and waits until it is gone, with all that it started: each command leads
 * a process group of its own, so that nothing is ended by name and nothing stays behind.
 */
export function runCommand(file: string, commandArguments: string[], options: { limitMs: number }): Promise<CommandResult> {
  const child = spawn(file, commandArguments, {
    stdio: ['ignore', 'pipe', 'pipe'],
    detached: true,
    env: { ...process.env, CI: 'true', NO_COLOR: '1', FORCE_COLOR: '0', NUXT_TELEMETRY_DISABLED: '1' },
  })
  running.add(child)
  const chunks: string[] = []
  child.stdout.on('data', (chunk: Buffer) => chunks.push(chunk.toString()))
  child.stderr.on('data', (chunk: Buffer) => chunks.push(chunk.toString()))
  let hasTimedOut = false
  const timer = setTimeout(() => {
    hasTimedOut = true
    endGroup(child)
  }, options.limitMs)
  return new Promise((resolve) => {
    const finish = (code: number | undefined, problem = '') => {
      clearTimeout(timer)
      if (!running.delete(child)) return
      endGroup(child)
      resolve({ code, output: chunks.join('') + problem, hasTimedOut })
    }
    child.once('error', error => finish(undefined, `\n${file} did not start: ${error.message}\n`))
    // Not `close`: a grandchild that holds the pipes open would keep it from coming.
    child.once('exit', code => setTimeout(() => finish(code ?? undefined), 50))
  })
}

/** Ends whatever is still running; for when the runner itself is told to stop. */
export function endAllCommands(): void {
  running.forEach(endGroup)
}

function endGroup(child: ChildProcess): void {
  if (child.pid === undefined) return
  try {
    process.kill(-child.pid, 'SIGKILL')
  }
  catch {
    // The whole group is gone: what was wanted.
  }
}
