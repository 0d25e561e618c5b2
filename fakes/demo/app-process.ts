import type { ChildProcess } from 'node:child_process'
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { setTimeout as wait } from 'node:timers/promises'

export interface RunningApp {
  url: string
  pid: number
  /** What it has printed so far. */
  output(): string
  /** Ends it as a service manager would and waits until it is gone. */
  stop(signal?: NodeJS.Signals): Promise<void>
}

const READY_WITHIN_MS = 20_000

/** Starts the built server as a process of its own and waits until it is healthy. @throws with its output when it is not. */
export async function startBuiltApp(environment: Record<string, string>, options: { isQuiet: boolean }): Promise<RunningApp> {
  const child = spawn(process.execPath, ['.output/server/index.mjs'], {
    // Nothing of the caller's settings: a stray variable would make the rehearsal differ from what it says.
    env: { PATH: process.env.PATH, NODE_ENV: 'production', ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  const output: string[] = []
  for (const stream of [child.stdout, child.stderr]) {
    stream.on('data', (chunk: Buffer) => {
      if (output.length < 20_000) output.push(chunk.toString())
      if (!options.isQuiet) process.stdout.write(chunk)
    })
  }
  const url = environment.APP_URL ?? ''
  await untilHealthy(child, url, output)
  return { url, pid: child.pid ?? 0, output: () => output.join(''), stop: signal => stopProcess(child, signal) }
}

async function untilHealthy(child: ChildProcess, url: string, output: string[]): Promise<void> {
  const deadlineMs = Date.now() + READY_WITHIN_MS
  while (Date.now() < deadlineMs) {
    if (child.exitCode !== null) throw new Error(`The server ended with code ${child.exitCode}.\n${output.join('')}`)
    if (await isHealthy(url)) return
    await wait(50)
  }
  await stopProcess(child, 'SIGKILL')
  throw new Error(`The server was not healthy after ${READY_WITHIN_MS / 1000} s.\n${output.join('')}`)
}

async function isHealthy(url: string): Promise<boolean> {
  try {
    return (await fetch(`${url}/health`)).ok
  }
  catch {
    return false
  }
}

async function stopProcess(child: ChildProcess, signal: NodeJS.Signals = 'SIGTERM'): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  const gone = once(child, 'exit')
  child.kill(signal)
  const isGone = await Promise.race([gone.then(() => true), wait(5000, false)])
  if (!isGone) {
    child.kill('SIGKILL')
    await gone
  }
}
