import { describe, expect, it } from 'vitest'
import { createTurnstile } from '#server/features/film/reading/turnstile'

/** A task that ends when told. */
function openTask(log: string[], name: string) {
  let end = (_error?: Error): void => {}
  const run = () => new Promise<string>((resolve, reject) => {
    log.push(name)
    end = error => error ? reject(error) : resolve(name)
  })
  return { run, end: (error?: Error) => end(error) }
}

async function settle(): Promise<void> {
  await new Promise(resolve => setImmediate(resolve))
}

describe('createTurnstile', () => {
  it('lets as many in as it is wide, the others in the order they came', async () => {
    const log: string[] = []
    const takeTurn = createTurnstile(2)
    const tasks = ['a', 'b', 'c', 'd'].map(name => openTask(log, name))
    const answers = tasks.map(task => takeTurn(task.run))
    await settle()
    expect(log).toEqual(['a', 'b'])
    tasks[1]?.end()
    await settle()
    expect(log).toEqual(['a', 'b', 'c'])
    tasks[0]?.end()
    await settle()
    expect(log).toEqual(['a', 'b', 'c', 'd'])
    tasks[2]?.end()
    tasks[3]?.end()
    expect(await Promise.all(answers)).toEqual(['a', 'b', 'c', 'd'])
  })

  it('passes a failure on and frees its place', async () => {
    const log: string[] = []
    const takeTurn = createTurnstile(1)
    const failing = openTask(log, 'failing')
    const answer = takeTurn(failing.run)
    const next = takeTurn(async () => 'next')
    await settle()
    failing.end(new Error('no'))
    await expect(answer).rejects.toThrow('no')
    expect(await next).toBe('next')
  })
})
