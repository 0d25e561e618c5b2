import type { ChildProcess } from 'node:child_process'
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { setTimeout as wait } from 'node:timers/promises'

/** Starts a TypeScript file of the bench as a process of its own, with a channel for messages. */
export function startChild(file: string, environment: Record<string, string> = {}): ChildProcess {
  return spawn(process.execPath, ['node_modules/jiti/lib/jiti-cli.mjs', file], {
    stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
    env: { PATH: process.env.PATH, NODE_ENV: 'production', ...environment },
  })
}

/** The next message from a child. @throws when it ends instead or is silent for too long. */
export async function nextMessage(child: ChildProcess, limitMs: number): Promise<unknown> {
  const ending = new AbortController()
  try {
    return await Promise.race([
      once(child, 'message', { signal: ending.signal }).then(([message]: unknown[]) => message),
      once(child, 'exit', { signal: ending.signal }).then(([code]: unknown[]) => {
        throw new Error(`A process of the bench ended with code ${String(code)}.`)
      }),
      wait(limitMs, undefined, { signal: ending.signal }).then(() => {
        throw new Error(`A process of the bench said nothing for ${limitMs} ms.`)
      }),
    ])
  }
  finally {
    ending.abort()
  }
}

export async function endChild(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  const gone = once(child, 'exit')
  child.kill('SIGKILL')
  await gone
}
