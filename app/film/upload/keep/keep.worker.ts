import { planParts, type PartRange } from '../plan'
import type { KeptPart } from './kept-film'
import { insertPart, listParts, updateKept } from './ledger'
import type { FromKeeper, ToKeeper } from './message'
import { weigh } from './pieces'
import { checkRoom, findSoundBytes, keepPart } from './shelf'

/**
 * Weighs each part of a film by SHA-256 and copies it onto the device; reads parts back before they are sent and says whether they
 * still weigh the same. The store counts the bytes of what it is sent and TLS guards the line, so what can go wrong unseen is the
 * copy (a device that was full, a page or a machine that went down) and a file chosen anew that is another one of the same name and
 * size: those two are what the weights are for.
 */

/**
 * While the line takes parts faster than the copy could, the copy gives way: it rests this many times as long as it worked. It waits
 * at first, to see what line it is.
 */
const REST_FACTOR = 10
const FIRST_REST_MS = 750

const arrived = new Set<number>()

addEventListener('message', ({ data: message }: MessageEvent<ToKeeper>) => {
  if (message.kind === 'keep') void keep(message)
  else if (message.kind === 'arrived') for (const number of message.numbers) arrived.add(number)
  else void findSoundBytes(message.clipId, message.number).then(bytes => tell({ kind: 'checked', number: message.number, bytes }))
})

async function keep({ clipId, file, partBytes }: ToKeeper & { kind: 'keep' }): Promise<void> {
  const ranges = planParts(file.size, partBytes)
  const known = await listParts(clipId).catch(() => [])
  if (!await isSameFile(file, ranges, known)) return tell({ kind: 'not-kept', reason: 'other-file' })
  tell({ kind: 'same' })
  const copied = new Set(known.filter(part => part.isCopied).map(part => part.number))
  try {
    await checkRoom(file.size)
    await rest(FIRST_REST_MS)
    let seenCount = 0
    for (const range of ranges) {
      if (copied.has(range.number)) continue
      const startedMs = performance.now()
      await keepInTurn(clipId, file, range)
      if (arrived.size > seenCount) await rest((performance.now() - startedMs) * REST_FACTOR)
      seenCount = arrived.size
    }
    await updateKept(clipId, { isWhole: true })
    tell({ kind: 'whole' })
  }
  catch {
    // Whatever the device says no with, the film can still be sent from the file that was chosen.
    tell({ kind: 'not-kept', reason: 'no-room' })
  }
}

async function isSameFile(file: Blob, ranges: readonly PartRange[], known: readonly KeptPart[]): Promise<boolean> {
  for (const { number, sha256 } of known) {
    const range = ranges[number - 1]
    if (range === undefined || await weigh(partOf(file, range)) !== sha256) return false
  }
  return true
}

/** A part that has arrived before its turn is weighed only. */
async function keepInTurn(clipId: string, file: Blob, range: PartRange): Promise<void> {
  const { number } = range
  const bytes = partOf(file, range)
  if (arrived.has(number)) {
    await insertPart({ clipId, number, bytes: bytes.size, sha256: await weigh(bytes), isCopied: false, body: undefined })
  }
  else {
    await keepPart(clipId, number, bytes)
  }
}

function partOf(file: Blob, { fromByte, toByte }: PartRange): Blob {
  return file.slice(fromByte, toByte)
}

function rest(restMs: number): Promise<void> {
  return new Promise(resolve => setTimeout(resolve, restMs))
}

function tell(message: FromKeeper): void {
  postMessage(message)
}
