import { existsSync, readFileSync } from 'node:fs'
import { setTimeout as wait } from 'node:timers/promises'
import { describe, expect, it } from 'vitest'
import { runCommand } from '#tests/runner/command'

const node = process.execPath

describe('running a stage\'s command', () => {
  it('tells the code and both streams', async () => {
    const result = await runCommand(node, ['-e', 'console.log("out"); console.error("err"); process.exit(3)'], { limitMs: 10_000 })
    expect(result.code).toBe(3)
    expect(result.output).toContain('out')
    expect(result.output).toContain('err')
    expect(result.hasTimedOut).toBe(false)
  })

  it('gives it no input to wait for', async () => {
    const result = await runCommand(node, ['-e', 'process.stdin.on("end", () => console.log("no input")).resume()'], { limitMs: 10_000 })
    expect(result.output).toContain('no input')
  })

  it('ends what takes too long, and what that started', async () => {
    const script = `const { spawn } = require('node:child_process')
      const child = spawn(process.execPath, ['-e', 'setInterval(() => {}, 1000)'])
      console.log('child ' + child.pid)
      setInterval(() => {}, 1000)`
    const result = await runCommand(node, ['-e', script], { limitMs: 3000 })
    expect(result).toMatchObject({ code: undefined, hasTimedOut: true })
    expect(await isGone(pidIn(result.output))).toBe(true)
  })

  it('ends what a finished command left behind', async () => {
    const script = `const { spawn } = require('node:child_process')
      const child = spawn(process.execPath, ['-e', 'setInterval(() => {}, 1000)'], { stdio: 'ignore' })
      child.unref()
      console.log('child ' + child.pid)`
    const result = await runCommand(node, ['-e', script], { limitMs: 10_000 })
    expect(result.code).toBe(0)
    expect(await isGone(pidIn(result.output))).toBe(true)
  })

  it('says so when there is no such program', async () => {
    const result = await runCommand('node_modules/.bin/no-such-program', [], { limitMs: 1000 })
    expect(result.code).toBeUndefined()
    expect(result.output).toContain('did not start')
  })
})

function pidIn(output: string): number {
  return Number(/child (\d+)/.exec(output)?.[1] ?? Number.NaN)
}

/** Signal 0 asks without sending. A zombie has ended: it only waits for whoever adopted it to take note. */
async function isGone(pid: number): Promise<boolean> {
  expect(pid).toBeGreaterThan(1)
  for (let tries = 0; tries < 100; tries += 1) {
    try {
      process.kill(pid, 0)
      if (stateOf(pid) === 'Z') return true
    }
    catch {
      return true
    }
    await wait(20)
  }
  return false
}

/** The letter after the program's name in brackets (proc(5)); undefined where there is no such file. */
function stateOf(pid: number): string | undefined {
  const path = `/proc/${pid}/stat`
  return existsSync(path) ? /\) (\w)/.exec(readFileSync(path, 'utf8'))?.[1] : undefined
}
