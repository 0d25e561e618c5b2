import { StoreUnavailable } from '#server/adapters/storage'
import { storeUnavailable } from './film.errors'

/** A store that is out of reach becomes a refusal that says what was kept. */
export async function reaching<T>(work: () => Promise<T>): Promise<T> {
  try {
    return await work()
  }
  catch (error) {
    throw error instanceof StoreUnavailable ? storeUnavailable() : error
  }
}
