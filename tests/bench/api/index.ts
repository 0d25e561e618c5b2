import { buildOnce } from '#fakes/demo/build'
import type { Bench } from '../bench'
import { startLoad } from '../load/load'
import { measureMoves } from './moves'
import { measureQueue } from './queue'

export const api: Bench = {
  about: 'The API under load, against bare handlers on the same kind of database, five runs in turn.',
  async run(tell) {
    buildOnce()
    const load = startLoad()
    try {
      return [...await measureQueue(load, tell), ...await measureMoves(load, tell)]
    }
    finally {
      await load.close()
    }
  },
}
