/** Folder of this origin's private storage that prepared films lie in until they are sent. */
const FOLDER = 'prepared-film'
/** By then it was sent, or its page was closed for good. */
const KEPT_MS = 24 * 60 * 60 * 1000

/** The part of FileSystemSyncAccessHandle that is used; the DOM's types leave it out, since only workers have it. */
export interface SyncWriter {
  write(bytes: Uint8Array<ArrayBuffer>, options: { at: number }): number
  flush(): void
  close(): void
}

export function canWriteInPlace(handle: FileSystemFileHandle): handle is FileSystemFileHandle & { createSyncAccessHandle(): Promise<SyncWriter> } {
  return 'createSyncAccessHandle' in handle
}

/** @returns undefined where the browser has no private storage, or gives none to this window. */
export async function openFolder(): Promise<FileSystemDirectoryHandle | undefined> {
  try {
    const root = await navigator.storage.getDirectory()
    return await root.getDirectoryHandle(FOLDER, { create: true })
  }
  catch {
    return undefined
  }
}

/** Removes a prepared film from this device, once it is sent or given up; one that is gone already is no matter. */
export async function forgetPrepared({ keptAs }: { keptAs: string | undefined }): Promise<void> {
  const folder = keptAs === undefined ? undefined : await openFolder()
  if (folder === undefined || keptAs === undefined) return
  await folder.removeEntry(keptAs).catch(ignoreMissing)
}

/** A prepared film of an earlier visit, to go on sending it after the page was closed. */
export async function findPrepared(keptAs: string): Promise<File | undefined> {
  try {
    const folder = await openFolder()
    return await (await folder?.getFileHandle(keptAs))?.getFile()
  }
  catch {
    return undefined
  }
}

/** Removes what pages left behind that were closed before their film was sent, a day later. */
export async function forgetOld(nowMs: number): Promise<void> {
  const folder = await openFolder()
  if (folder === undefined) return
  for await (const [name, handle] of folder.entries()) {
    if (!(handle instanceof FileSystemFileHandle)) continue
    const { lastModified } = await handle.getFile()
    if (nowMs - lastModified > KEPT_MS) await folder.removeEntry(name).catch(ignoreMissing)
  }
}

/** Gone already, or still held by another tab that is writing it. */
function ignoreMissing(error: unknown): void {
  if (!(error instanceof DOMException)) throw error
}
