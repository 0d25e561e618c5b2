const LOCAL_PART = /^[\w.!#$%&'*+/=?^`{|}~-]{1,64}$/
const DOMAIN_LABEL = /^[\p{L}\p{N}](?:[\p{L}\p{N}-]{0,61}[\p{L}\p{N}])?$/u

/**
 * Whether a whole mailbox can be written to: `local@domain`, local part in ASCII without dots at its
 * edges or in pairs (RFC 5321 4.1.2, quoted forms left out: nobody has one), a domain of two or more
 * labels. The domain may be Unicode because the SMTP library has turned punycode back by then.
 */
export function isMailbox(address: string): boolean {
  const at = address.lastIndexOf('@')
  if (at < 1 || address.length > 254) return false
  const local = address.slice(0, at)
  const labels = address.slice(at + 1).split('.')
  if (!LOCAL_PART.test(local) || local.startsWith('.') || local.endsWith('.') || local.includes('..')) return false
  return labels.length >= 2 && labels.every(label => DOMAIN_LABEL.test(label))
}
