import { z } from 'zod'

/** UUIDv7 as text; the version digit is checked so that a foreign id reads as malformed, not as missing. */
export const idSchema = z.string().regex(/^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/, 'This is not an id.')

export const idParams = z.object({ id: idSchema })

/** A link's secret: 32 random bytes in base64url. */
export const tokenSchema = z.string().regex(/^[A-Za-z0-9_-]{43}$/, 'This link is not complete. Open it from the e-mail again.')

export const tokenParams = z.object({ token: tokenSchema })

/** As `slugOf` makes them of a coach's name. */
export const slugParams = z.object({ slug: z.string().regex(/^[a-z0-9-]{1,80}$/, 'This is not an address of a coach.') })

export const pageQuery = z.object({
  cursor: z.string().max(200).optional(),
  limit: z.coerce.number().int().min(1).max(100).default(25),
})

export const emailSchema = z.string().trim().max(254, 'At most 254 characters.').pipe(z.email('Enter an e-mail address, such as name@example.org.'))

/** NUL ends strings in C and is refused by mail servers; no name or text needs it. */
export function text(maxLength: number) {
  return z.string().max(maxLength, `At most ${maxLength} characters.`).refine(value => !value.includes('\0'), 'Leave out the invisible character.')
}

export function requiredText(maxLength: number, message = 'Fill this in.') {
  return text(maxLength).refine(value => value.trim().length > 0, message)
}

export const timeZoneSchema = z.string().max(64).refine(isTimeZone, 'Choose a time zone from the list.')

function isTimeZone(name: string): boolean {
  try {
    return new Intl.DateTimeFormat('en', { timeZone: name }).resolvedOptions().timeZone.length > 0
  }
  catch {
    return false
  }
}

/** For requests that carry nothing but their address. */
export const emptySchema = z.object({})
