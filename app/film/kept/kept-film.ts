import type { ClipView, PreparedAs } from '#shared/types/reviews'

/** A clip made ready before there is an account to send it with. */
export interface KeptFilm {
  view: ClipView
  file: File
  preparedAs: PreparedAs
  captureFramesPerSecond: number | undefined
}

const DATABASE = 'turfnote-film'
const STORE = 'kept'

/** Keeps a clip in this browser, in place of an earlier one of that view. @throws where the browser keeps nothing, or has no room */
export async function keepFilm(film: KeptFilm): Promise<void> {
  const { view, file, preparedAs, captureFramesPerSecond } = film
  // The bytes themselves: a file that lies elsewhere on the device may be gone when it is wanted.
  const bytes = await file.arrayBuffer()
  await inStore('readwrite', store => store.put({ view, bytes, name: file.name, type: file.type, preparedAs, captureFramesPerSecond }))
}

/** Clips kept here; empty where the browser keeps nothing. */
export async function listKeptFilm(): Promise<KeptFilm[]> {
  const found: unknown = await inStore('readonly', store => store.getAll()).catch(() => [])
  return Array.isArray(found) ? found.map(readFilm).filter(film => film !== undefined) : []
}

export async function forgetFilm(view: ClipView): Promise<void> {
  await inStore('readwrite', store => store.delete(view)).catch(() => undefined)
}

async function inStore<T>(mode: IDBTransactionMode, act: (store: IDBObjectStore) => IDBRequest<T>): Promise<T> {
  const database = await open()
  try {
    return await new Promise<T>((resolve, reject) => {
      const transaction = database.transaction(STORE, mode)
      const request = act(transaction.objectStore(STORE))
      // Only when it is whole: a request may succeed and its transaction still fail for want of room.
      transaction.oncomplete = () => resolve(request.result)
      transaction.onabort = () => reject(transaction.error ?? new Error('This browser kept nothing.'))
    })
  }
  finally {
    database.close()
  }
}

function open(): Promise<IDBDatabase> {
  return new Promise((resolve, reject) => {
    const request = indexedDB.open(DATABASE, 1)
    request.onupgradeneeded = () => request.result.createObjectStore(STORE, { keyPath: 'view' })
    request.onsuccess = () => resolve(request.result)
    request.onerror = () => reject(request.error ?? new Error('This browser keeps nothing.'))
  })
}

function readFilm(value: unknown): KeptFilm | undefined {
  if (typeof value !== 'object' || value === null) return undefined
  const [view, bytes, name, type, preparedAs, rate] = ['view', 'bytes', 'name', 'type', 'preparedAs', 'captureFramesPerSecond'].map((key): unknown => Reflect.get(value, key))
  const knownView = (['face_on', 'down_the_line'] as const).find(one => one === view)
  if (knownView === undefined || !(bytes instanceof ArrayBuffer) || typeof name !== 'string' || typeof type !== 'string') return undefined
  return {
    view: knownView,
    file: new File([bytes], name, { type }),
    preparedAs: (['re_encoded', 'cut', 'remuxed'] as const).find(one => one === preparedAs) ?? 'original',
    captureFramesPerSecond: typeof rate === 'number' ? rate : undefined,
  }
}
