import { webcrypto } from 'node:crypto'
import { defaults, seal } from 'iron-webcrypto'

/** The cookie that the server would have given for a session row. */
export async function sealSessionCookie(environment: Record<string, string>, sessionId: string): Promise<string> {
  const session = { id: crypto.randomUUID(), createdAt: Date.now(), data: { user: { sessionId } } }
  const sealed = await seal(webcrypto, session, environment.NUXT_SESSION_PASSWORD ?? '', { ...defaults, ttl: 30 * 24 * 3600 * 1000 })
  return `${environment.NUXT_SESSION_NAME ?? ''}=${sealed}`
}
