import { isKeptFilm, isKeptPart, type KeptFilm, type KeptPart } from './kept-film'

/** Which films and parts lie on this device. In IndexedDB, whose records are written whole or not at all. */

const NAME = 'turfnote-sending'
const FILMS = 'films'
const PARTS = 'parts'

export async function insertKept(film: KeptFilm): Promise<void> {
  await inStores('readwrite', films => films.put(film))
}

/** Changes a film that is there; one that was forgotten meanwhile stays forgotten. */
export async function updateKept(clipId: string, change: Partial<Pick<KeptFilm, 'doneNumbers' | 'isWhole' | 'isPaused'>>): Promise<void> {
  await inStores('readwrite', (films) => {
    const found = films.get(clipId)
    found.onsuccess = () => {
      if (isKeptFilm(found.result)) films.put({ ...found.result, ...change })
    }
    return found
  })
}

export async function findKept(clipId: string): Promise<KeptFilm | undefined> {
  const found = await inStores('readonly', films => films.get(clipId))
  return isKeptFilm(found) ? found : undefined
}

export async function listKept(): Promise<KeptFilm[]> {
  const all = await inStores('readonly', films => films.getAll())
  return Array.isArray(all) ? all.filter(isKeptFilm) : []
}

export async function insertPart(part: KeptPart): Promise<void> {
  await inStores('readwrite', (_films, parts) => parts.put(part))
}

export async function findPart(clipId: string, number: number): Promise<KeptPart | undefined> {
  const found = await inStores('readonly', (_films, parts) => parts.get([clipId, number]))
  return isKeptPart(found) ? found : undefined
}

/** By number, ascending. */
export async function listParts(clipId: string): Promise<KeptPart[]> {
  const all = await inStores('readonly', (_films, parts) => parts.getAll(partsOf(clipId)))
  return Array.isArray(all) ? all.filter(isKeptPart) : []
}

/** The film and the records of its parts. */
export async function deleteKept(clipId: string): Promise<void> {
  await inStores('readwrite', (films, parts) => {
    films.delete(clipId)
    return parts.delete(partsOf(clipId))
  })
}

function partsOf(clipId: string): IDBKeyRange {
  return IDBKeyRange.bound([clipId, 0], [clipId, Number.MAX_SAFE_INTEGER])
}

/**
 * One transaction over both stores.
 * @returns what the request of `act` found, once the transaction is through
 * @throws the browser's own error: no database in this window, or no room
 */
async function inStores(
  mode: IDBTransactionMode,
  act: (films: IDBObjectStore, parts: IDBObjectStore) => { readonly result: unknown },
): Promise<unknown> {
  const database = await open()
  try {
    return await new Promise((resolve, reject) => {
      const transaction = database.transaction([FILMS, PARTS], mode)
      const asked = act(transaction.objectStore(FILMS), transaction.objectStore(PARTS))
      transaction.oncomplete = () => resolve(asked.result)
      transaction.onabort = () => reject(transaction.error)
      transaction.onerror = () => reject(transaction.error)
    })
  }
  finally {
    // Kept open it would block a later version of this page, open in another tab, from changing the database.
    database.close()
  }
}

function open(): Promise<IDBDatabase> {
  return new Promise((resolve, reject) => {
    const request = indexedDB.open(NAME, 1)
    request.onupgradeneeded = () => {
      request.result.createObjectStore(FILMS, { keyPath: 'clipId' })
      request.result.createObjectStore(PARTS, { keyPath: ['clipId', 'number'] })
    }
    request.onsuccess = () => resolve(request.result)
    request.onerror = () => reject(request.error)
  })
}
