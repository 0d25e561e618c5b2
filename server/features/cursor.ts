import { idSchema } from '#shared/schemas/common'
import { invalidFields } from '#server/refusal'

/** Where a page ended: the next one begins below this row, in order of time and then of id. */
export interface Cursor {
  /** UTC epoch milliseconds. */
  atMs: number
  id: string
}

/** A cursor as text for an address. Opaque to readers: what it is made of may change. */
export function encodeCursor({ atMs, id }: Cursor): string {
  return Buffer.from(`${atMs},${id}`).toString('base64url')
}

/** @throws Refusal `invalid-fields` (422, field `cursor`) for what `encodeCursor` never made. */
export function decodeCursor(text: string): Cursor {
  const parts = /^(0|-?[1-9]\d{0,15}),(.+)$/.exec(Buffer.from(text, 'base64url').toString('utf8'))
  const atMs = Number(parts?.[1])
  const id = idSchema.safeParse(parts?.[2])
  const isOurs = Number.isSafeInteger(atMs) && id.success && encodeCursor({ atMs, id: id.data }) === text
  if (!isOurs) throw invalidFields({ cursor: 'This is not where a page ended. Begin with the first page.' })
  return { atMs, id: id.data }
}

/** Cuts `limit + 1` rows to a page and says where the next one begins. */
export function toPage<Row, Item>(
  rows: readonly Row[], limit: number, toItem: (row: Row) => Item, cursorOf: (row: Row) => Cursor,
): { items: Item[], nextCursor: string | null } {
  const shown = rows.slice(0, limit)
  const last = shown.at(-1)
  return { items: shown.map(toItem), nextCursor: last && rows.length > limit ? encodeCursor(cursorOf(last)) : null }
}
