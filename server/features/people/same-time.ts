import { setTimeout as wait } from 'node:timers/promises'

/**
 * Answers no sooner than `ms` after the call, so that how long the work took tells nothing of what it found.
 * Work that takes longer is answered when it is done.
 */
export async function takingAtLeast<T>(ms: number, work: () => Promise<T>): Promise<T> {
  const [result] = await Promise.all([work(), wait(ms)])
  return result
}
