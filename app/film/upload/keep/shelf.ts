import { deleteKept, findPart, insertPart } from './ledger'
import { weigh } from './pieces'

/**
 * The bytes of kept films, a file for each part in the origin's private file system, or in the database where there is none.
 * A file for each part and not one for the film: a browser refuses to read a file that has changed since it was opened, so one
 * that grows could not be sent while it grows.
 */
const FOLDER = 'film-being-sent'

/** The part of FileSystemSyncAccessHandle that is used; the DOM's types leave it out, since only workers have it. */
interface SyncWriter {
  truncate(bytes: number): void
  write(bytes: Uint8Array<ArrayBuffer>): number
  close(): void
}

/** There is too little room on this device, or none that a page may use. */
export class NoRoom extends Error {}

/** @throws NoRoom when the device says that so many bytes would not fit. */
export async function checkRoom(bytes: number): Promise<void> {
  const { quota = Infinity, usage = 0 } = await navigator.storage.estimate()
  if (quota - usage < bytes) throw new NoRoom('The film would not fit.')
}

/**
 * Puts a part on the device, for workers only. Nothing is forced onto the disk: what a power cut leaves behind weighs less than it
 * should and is not sent.
 * @throws NoRoom, or the browser's own error when the file cannot be read or the device is full
 */
export async function keepPart(clipId: string, number: number, bytes: Blob): Promise<void> {
  const writer = await openWriter(clipId, number)
  try {
    writer?.truncate(0)
    const sha256 = await weigh(bytes, (piece) => {
      if (writer !== undefined && writer.write(piece) < piece.byteLength) throw new NoRoom('The device is full.')
    })
    const body = writer === undefined ? new Blob([await bytes.arrayBuffer()]) : undefined
    await insertPart({ clipId, number, bytes: bytes.size, sha256, isCopied: true, body })
  }
  finally {
    writer?.close()
  }
}

/** The bytes of a part that lie here, if they are what was put there; undefined when they are not, or there are none. */
export async function findSoundBytes(clipId: string, number: number): Promise<Blob | undefined> {
  try {
    const part = await findPart(clipId, number)
    const bytes = part?.body ?? await findFile(clipId, number)
    if (bytes === undefined || bytes.size !== part?.bytes) return undefined
    return await weigh(bytes) === part.sha256 ? bytes : undefined
  }
  catch {
    return undefined
  }
}

/** Removes a film from this device: the record first, so that nobody goes on with half of one. */
export async function forgetFilm(clipId: string): Promise<void> {
  try {
    await deleteKept(clipId)
    await (await findShelf())?.removeEntry(clipId, { recursive: true })
  }
  catch {
    // Nothing there, or still open in a worker that is ending: the sweep of old films takes what is left.
  }
}

/** Clip ids of all folders, with or without a record. */
export async function listFolders(): Promise<string[]> {
  const names: string[] = []
  for await (const name of (await findShelf())?.keys() ?? []) names.push(name)
  return names
}

/** @returns undefined when this browser has no private files that can be written in place. */
async function openWriter(clipId: string, number: number): Promise<SyncWriter | undefined> {
  const folder = await (await findShelf())?.getDirectoryHandle(clipId, { create: true })
  const handle = await folder?.getFileHandle(String(number), { create: true })
  return handle !== undefined && canWriteInPlace(handle) ? await handle.createSyncAccessHandle() : undefined
}

async function findFile(clipId: string, number: number): Promise<File | undefined> {
  const folder = await (await findShelf())?.getDirectoryHandle(clipId)
  return await (await folder?.getFileHandle(String(number)))?.getFile()
}

async function findShelf(): Promise<FileSystemDirectoryHandle | undefined> {
  try {
    return await (await navigator.storage.getDirectory()).getDirectoryHandle(FOLDER, { create: true })
  }
  catch {
    return undefined
  }
}

function canWriteInPlace(handle: FileSystemFileHandle): handle is FileSystemFileHandle & { createSyncAccessHandle(): Promise<SyncWriter> } {
  return 'createSyncAccessHandle' in handle
}
