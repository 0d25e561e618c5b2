import type { StreamTargetChunk, Target } from 'mediabunny'
import { BufferTarget, Mp4OutputFormat, StreamTarget } from 'mediabunny'
import type { SyncWriter } from './device-storage'
import { canWriteInPlace, openFolder } from './device-storage'

const TYPE = 'video/mp4'
/** Free space asked for, as a multiple of what the film should take. */
const SPARE = 2

/** Where a new film is written: on the device's own storage where there is some, else in memory. */
export interface PreparedFile {
  format: Mp4OutputFormat
  target: Target
  /** Once the film is whole. */
  close(): Promise<{ bytes: Blob, keptAs: string | undefined }>
  /** Leaves nothing behind, however far it had come. */
  discard(): Promise<void>
}

/**
 * @param expectedBytes about how large the film will be
 * @returns a file whose index will stand in front, so that a browser shows it before all of it is there
 */
export async function createPreparedFile(expectedBytes: number): Promise<PreparedFile> {
  return await tryOnDevice(expectedBytes) ?? createInMemory()
}

function createInMemory(): PreparedFile {
  const target = new BufferTarget()
  return {
    format: new Mp4OutputFormat({ fastStart: 'in-memory' }),
    target,
    close: () => Promise.resolve({ bytes: new Blob(target.buffer ? [target.buffer] : [], { type: TYPE }), keptAs: undefined }),
    discard: () => Promise.resolve(),
  }
}

/** Private windows and older browsers have no such storage, or too little of it: then memory must do. */
async function tryOnDevice(expectedBytes: number): Promise<PreparedFile | undefined> {
  try {
    const { quota = Infinity, usage = 0 } = await navigator.storage.estimate()
    const folder = await openFolder()
    if (folder === undefined || quota - usage < expectedBytes * SPARE) return undefined
    const keptAs = `${crypto.randomUUID()}.mp4`
    const handle = await folder.getFileHandle(keptAs, { create: true })
    if (!canWriteInPlace(handle)) {
      await folder.removeEntry(keptAs)
      return undefined
    }
    const writer = await handle.createSyncAccessHandle()
    return {
      // The number of frames is known, so room for the index is left in front and no frame waits in memory for it.
      format: new Mp4OutputFormat({ fastStart: 'reserve' }),
      target: new StreamTarget(writableOf(writer), { chunked: true, chunkSize: 4 * 1024 * 1024 }),
      close: async () => {
        writer.flush()
        writer.close()
        return { bytes: await handle.getFile(), keptAs }
      },
      discard: async () => {
        writer.close()
        await folder.removeEntry(keptAs)
      },
    }
  }
  catch {
    return undefined
  }
}

function writableOf(writer: SyncWriter): WritableStream<StreamTargetChunk> {
  return new WritableStream({
    write({ data, position }) {
      const written = writer.write(data, { at: position })
      if (written < data.byteLength) throw new Error('The storage of this device is full.')
    },
  })
}
