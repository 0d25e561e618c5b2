import type { StoredObject } from '#server/adapters/storage'
import type { Ctx } from '#server/context'
import type { FindNaming, ListNeeding, NamedObject } from './sweep.repository'

/** One kind of thing that is half a row and half an object. */
export interface ObjectKind {
  prefix: string
  findNaming: FindNaming
  listNeeding: ListNeeding
  /** What becomes of a row whose object is gone. */
  lose: (ctx: Ctx, id: string) => Promise<void>
}

/** More than that at once is no lost film: it is another store, or an emptied one, and a person must look. */
const MAX_LOST = 50

/**
 * Goes through the store and the rows side by side, in order of key: objects that no row names and that are older than `beforeMs` go, and so
 * do those of refused film at any age; rows that are older and have no object are lost. Holds one page of the store at a time.
 */
export async function matchObjects(ctx: Ctx, kind: ObjectKind, beforeMs: number): Promise<void> {
  const lost: NamedObject[] = []
  let afterKey = kind.prefix
  let page: StoredObject[] | undefined
  for await (const next of ctx.storage.objectPages(kind.prefix)) {
    if (page) afterKey = await matchPage(ctx, kind, { page, afterKey, isLast: false, beforeMs, lost })
    page = next
  }
  await matchPage(ctx, kind, { page: page ?? [], afterKey, isLast: true, beforeMs, lost })
  if (lost.length > MAX_LOST) {
    ctx.log.error({ prefix: kind.prefix, missing: lost.length }, 'the store lacks many objects that rows name; nothing was changed. Is it the right bucket?')
    return
  }
  for (const row of lost) await loseUnlessThere(ctx, kind, row)
}

interface PageWork {
  page: StoredObject[]
  afterKey: string
  isLast: boolean
  beforeMs: number
  lost: NamedObject[]
}

/** @returns the key with which the page ends. */
async function matchPage(ctx: Ctx, kind: ObjectKind, { page, afterKey, isLast, beforeMs, lost }: PageWork): Promise<string> {
  const lastKey = page.at(-1)?.key ?? afterKey
  const range = { afterKey, toKey: isLast ? endOf(kind.prefix) : lastKey, beforeMs }
  const stored = new Set(page.map(({ key }) => key))
  // Enough to know that it is too many.
  if (lost.length <= MAX_LOST) lost.push(...(await kind.listNeeding(ctx.db, range)).filter(row => !stored.has(row.object_key)))
  const naming = new Map((await kind.findNaming(ctx.db, [...stored])).map(row => [row.object_key, row]))
  for (const { key, changedAtMs } of page) {
    const row = naming.get(key)
    if (row ? row.isRefused : changedAtMs < beforeMs) await ctx.storage.remove(key)
  }
  return lastKey
}

/** Asked once more, of the object itself: it may have come since the store was listed. */
async function loseUnlessThere(ctx: Ctx, kind: ObjectKind, { id, object_key: key }: NamedObject): Promise<void> {
  if (await ctx.storage.findBytes(key) !== undefined) return
  ctx.log.error({ key }, 'an object that a row names is gone from the store')
  await kind.lose(ctx, id)
}

/** The first key after all that begin with `prefix`, which ends with a slash. */
function endOf(prefix: string): string {
  return `${prefix.slice(0, -1)}0`
}
