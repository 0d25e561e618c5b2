/**
 * A name as it can stand in an address: lower-case ASCII letters and digits joined by single hyphens, 60 characters at most. Letters
 * lose their accents; a name in another script, or without letters, gives `coach`.
 */
export function slugOf(name: string): string {
  const slug = name
    .normalize('NFKD').replace(/\p{Mark}+/gu, '')
    .replace(/ß/g, 'ss').replace(/[æÆ]/g, 'ae').replace(/[øØ]/g, 'o').replace(/[łŁ]/g, 'l').replace(/[đĐðÐ]/g, 'd').replace(/[þÞ]/g, 'th')
    .toLowerCase()
    .replace(/['’]/g, '')
    .replace(/[^a-z0-9]+/g, '-')
    .slice(0, 60)
    .replace(/^-+|-+$/g, '')
  return slug === '' ? 'coach' : slug
}

/** `slug`, or the first of `slug-2`, `slug-3` … that is not in `taken`. */
export function freeSlug(slug: string, taken: ReadonlySet<string>): string {
  if (!taken.has(slug)) return slug
  for (let number = 2; ; number++) {
    const candidate = `${slug}-${number}`
    if (!taken.has(candidate)) return candidate
  }
}
