import type { Viewer } from '#shared/types/people'

/** Where a signed-in person starts: students and guardians with reviews, coaches with the queue, other owners with people. */
export function firstScreen(viewer: Pick<Viewer, 'role' | 'isCoach'>): string {
  if (viewer.isCoach) return '/desk'
  return viewer.role === 'owner' ? '/studio/people' : '/reviews'
}

/**
 * The path in `?to=` when it stays on this site, else undefined.
 * A link in a mail may carry any `to`; `//host`, `/\host` and control characters would leave for another site.
 */
export function findReturnPath(to: unknown): string | undefined {
  if (typeof to !== 'string' || !/^\/(?![/\\])[\x21-\x7E]*$/.test(to)) return undefined
  const base = 'http://site.invalid'
  const address = URL.canParse(to, base) ? new URL(to, base) : undefined
  return address?.origin === base ? `${address.pathname}${address.search}${address.hash}` : undefined
}
