import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { filmKills, sendThroughKills } from '#tests/faults/film/kills'
import { mismatches, storeOf } from '#tests/support/store'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 49 })
})

afterAll(() => world.close())

describe('[film.5] kills while film is sent, in short', () => {
  it('[film.5] after five there is no object without its row and no row without its object', async () => {
    const told: string[] = []
    expect(await sendThroughKills(world, 5, line => told.push(line))).toEqual([])
    expect(told.at(-1)).toMatch(/^\d+ clips begun through 5 kills/)
  }, 120_000)

  it('[film.5] the judgement sees what does not fit together', async () => {
    await storeOf(world).put('film/nobody/stray.mp4', Buffer.from('left behind'), 'video/mp4')
    expect(await mismatches(world)).toEqual([expect.stringContaining('film/nobody/stray.mp4')])
    expect(filmKills.about).toMatch(/^100 times/)
  })
})
