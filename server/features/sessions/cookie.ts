import type { H3Event } from 'h3'
import { getCookie } from 'h3'

declare module '#auth-utils' {
  interface User {
    /** The id of a row in `sessions`; that row, not the cookie, says who is signed in. */
    sessionId: string
  }
}

/** Unsealed cookies that were seen lately, by their sealed text. */
const unsealed = new Map<string, string>()
const MAX_UNSEALED = 5000

/**
 * The session id that the request's cookie holds; undefined for a visitor, who is given no cookie.
 *
 * Unsealing costs more than the rest of a short request, so its result is kept by the sealed text. That is safe: the same text
 * always unseals to the same id, it can only be in here after its seal was proved, and whether the session still holds is asked of its row
 * at every request.
 */
export async function findSessionId(event: H3Event): Promise<string | undefined> {
  const sealed = getCookie(event, cookieName())
  if (!sealed) return undefined
  const known = unsealed.get(sealed)
  if (known) return known
  const { user } = await getUserSession(event)
  if (!user) return undefined
  if (unsealed.size >= MAX_UNSEALED) unsealed.clear()
  unsealed.set(sealed, user.sessionId)
  return user.sessionId
}

export async function giveSessionCookie(event: H3Event, sessionId: string): Promise<void> {
  await replaceUserSession(event, { user: { sessionId } })
}

export async function takeSessionCookie(event: H3Event): Promise<void> {
  if (getCookie(event, cookieName())) await clearUserSession(event)
}

/** Without the event on purpose: with it the whole configuration is copied at every request. */
function cookieName(): string {
  return useRuntimeConfig().session.name ?? 'nuxt-session'
}
