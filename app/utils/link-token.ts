/** The secret of a link from a mail (`?token=`), or undefined when the link has been cut or doubled on its way. */
export function readToken(query: unknown): string | undefined {
  return typeof query === 'string' && /^[A-Za-z0-9_-]{43}$/.test(query) ? query : undefined
}
