import { describe, expect, it } from 'vitest'
import { createHashQueue } from '#server/features/people/passwords/hash-queue'

/** Work that runs until told to end. */
function heldWork() {
  let end = () => {}
  const held = new Promise<void>((resolve) => {
    end = resolve
  })
  return { held, end: () => end() }
}

const settle = () => new Promise(resolve => setImmediate(resolve))

describe('hash queue', () => {
  it('runs two at once, the others in the order in which they came', async () => {
    const queue = createHashQueue(2, 10)
    const works = Array.from({ length: 5 }, heldWork)
    const started: number[] = []
    const all = works.map((work, index) => queue.run(async () => {
      started.push(index)
      await work.held
      return index
    }))
    await settle()
    expect(started).toEqual([0, 1])
    works[1]?.end()
    await settle()
    expect(started).toEqual([0, 1, 2])
    works.forEach(work => work.end())
    expect(await Promise.all(all)).toEqual([0, 1, 2, 3, 4])
    expect(started).toEqual([0, 1, 2, 3, 4])
  })

  it('gives a place back when work fails', async () => {
    const queue = createHashQueue(1, 10)
    await expect(queue.run(async () => {
      throw new Error('broken')
    })).rejects.toThrow('broken')
    expect(await queue.run(async () => 'next')).toBe('next')
  })

  it('turns away whoever comes when too many wait, and only them', async () => {
    const queue = createHashQueue(1, 1)
    const first = heldWork()
    const running = queue.run(() => first.held)
    const waiting = queue.run(async () => 'waited')
    await expect(queue.run(async () => 'third')).rejects.toMatchObject({ kind: 'unavailable', code: 'busy' })
    first.end()
    await running
    expect(await waiting).toBe('waited')
    expect(await queue.run(async () => 'later')).toBe('later')
  })
})
