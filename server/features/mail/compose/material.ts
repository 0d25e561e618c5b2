import type { Ctx } from '#server/context'
import type { StudioRow } from '#server/features/people/studio.repository'
import type { UserRow } from '#server/features/people/user.repository'
import type { Letter } from '../layout'
import type { OutboxRow } from '../outbox.repository'

/** What every letter is made from. */
export interface Material {
  ctx: Ctx
  row: OutboxRow
  studio: StudioRow
  /** Undefined when the letter goes to a bare address. */
  reader: UserRow | undefined
  /** The zone in which this reader reads times; the studio's for a bare address. */
  timeZone: string
}

/** Loads what one kind of letter speaks of, and writes it; undefined when that is gone or no longer so. */
export type Composer = (material: Material) => Promise<Letter | undefined>

/** An absolute address of a page of ours. */
export function pageUrl({ settings }: Ctx, path: string, token?: string): string {
  return `${settings.appUrl}${path}${token === undefined ? '' : `?token=${encodeURIComponent(token)}`}`
}
