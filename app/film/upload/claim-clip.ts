/**
 * Runs `act` while no other tab of this browser sends the same clip; the lock goes with the tab, however it ends.
 * @param onElsewhere called when another tab has it; `act` then waits for that tab to end or to finish
 * @throws what `act` throws; the signal's reason when aborted while waiting
 */
export async function asOnlySender<T>(clipId: string, signal: AbortSignal, onElsewhere: () => void, act: (hadToWait: boolean) => Promise<T>): Promise<T> {
  const name = `turfnote-clip-${clipId}`
  // Missing in old browsers and on plain http; the store takes a part twice without harm, it is only sent in vain.
  const locks = findLocks()
  if (locks === undefined) return await act(false)
  const done = await locks.request(name, { ifAvailable: true }, async lock => lock === null ? undefined : { result: await act(false) })
  if (done !== undefined) return done.result
  onElsewhere()
  return await locks.request(name, { signal }, () => act(true))
}

function findLocks(): LockManager | undefined {
  return 'locks' in navigator ? navigator.locks : undefined
}
