import type { PartRange } from '../plan'
import { UploadStopped } from '../send-parts'
import type { FromKeeper, NotKept, ToKeeper } from './message'

/** Keeps one film on the device while it is sent, and gives its parts out. */
export interface FilmKeeper {
  /**
   * The bytes of a part: from the chosen file while it can be read, else from the copy, if that is sound.
   * @throws UploadStopped `unreadable` when neither has them, `other-file` when the file is not the one begun before
   */
  bytesOf(range: PartRange, signal: AbortSignal): Promise<Blob>
  /** The store has these: they need not be copied. */
  noteArrived(numbers: readonly number[]): void
  /** Ends the worker; what lies on the device stays. */
  close(): void
}

interface FilmToKeep {
  clipId: string
  partBytes: number
  /** Undefined for a film that lies on the device whole already. */
  file: Blob | undefined
  /** When every part lies on the device or in the store, so that the page may be closed. */
  onWhole: () => void
}

/** `comparing`: whether the file is the one begun before. */
type State = 'comparing' | 'keeping' | 'whole' | NotKept

export function openKeeper({ clipId, partBytes, file, onWhole }: FilmToKeep): FilmKeeper {
  let state: State = file === undefined ? 'whole' : 'comparing'
  const waiting = new Set<() => void>()
  const asked = new Set<number>()
  const checks = new Map<number, (bytes: Blob | undefined) => void>()
  const worker = new Worker(new URL('./keep.worker.ts', import.meta.url), { type: 'module' })
  const ask = (message: ToKeeper) => worker.postMessage(message)

  function settle(next: State) {
    state = next
    for (const goOn of waiting) goOn()
    if (next === 'whole') onWhole()
  }

  worker.addEventListener('message', ({ data: message }: MessageEvent<FromKeeper>) => {
    if (message.kind === 'same') settle('keeping')
    else if (message.kind === 'whole') settle('whole')
    else if (message.kind === 'not-kept') settle(message.reason)
    else {
      checks.get(message.number)?.(message.bytes)
      checks.delete(message.number)
    }
  })
  worker.addEventListener('error', () => {
    settle('no-room')
    for (const answer of checks.values()) answer(undefined)
    checks.clear()
  })
  if (file !== undefined) ask({ kind: 'keep', clipId, file, partBytes })

  const findKeptBytes = (number: number) => new Promise<Blob | undefined>((resolve) => {
    if (state === 'no-room') return resolve(undefined)
    checks.set(number, resolve)
    ask({ kind: 'check', clipId, number })
  })

  return {
    async bytesOf(range, signal) {
      while (state === 'comparing') await nextWord(waiting, signal)
      if (state === 'other-file') throw new UploadStopped('other-file')
      // Looked at only when a first try has failed: the look costs more than it finds.
      if (file !== undefined && !asked.has(range.number)) {
        asked.add(range.number)
        return file.slice(range.fromByte, range.toByte)
      }
      const bytes = await findReadable(file, range) ?? await findKeptBytes(range.number)
      if (bytes === undefined) throw new UploadStopped('unreadable')
      return bytes
    },
    noteArrived: numbers => ask({ kind: 'arrived', numbers: [...numbers] }),
    close: () => worker.terminate(),
  }
}

function nextWord(waiting: Set<() => void>, signal: AbortSignal): Promise<void> {
  return new Promise((resolve, reject) => {
    signal.throwIfAborted()
    const end = () => {
      waiting.delete(goOn)
      signal.removeEventListener('abort', stop)
    }
    const goOn = () => {
      end()
      resolve()
    }
    const stop = () => {
      end()
      reject(signal.reason)
    }
    waiting.add(goOn)
    signal.addEventListener('abort', stop)
  })
}

/** A chosen file can go away under the page (a card pulled out, a file kept in a cloud); sending it would only look like a bad line. */
async function findReadable(file: Blob | undefined, { fromByte, toByte }: PartRange): Promise<Blob | undefined> {
  try {
    await file?.slice(fromByte, fromByte + 1).arrayBuffer()
    return file?.slice(fromByte, toByte)
  }
  catch {
    return undefined
  }
}
