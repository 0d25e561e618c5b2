import type { Ctx } from '#server/context'
import { keyedHash } from '#server/ids'

/** What makes two addresses one account: case does not count, though mail systems could tell it apart. */
export function emailKey(email: string): string {
  return email.normalize('NFC').toLowerCase()
}

/** An address as the limiter counts it: its file need not hold anyone's address. */
export function limitKey(ctx: Pick<Ctx, 'settings'>, email: string): string {
  return keyedHash(ctx.settings.sessionPassword, emailKey(email))
}
