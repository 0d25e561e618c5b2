import type { IncomingMessage } from 'node:http'
import { isIP } from 'node:net'
import type { Settings } from '#server/settings'

/**
 * Where a request comes from, as the limits count it. Behind a proxy of ours that is what the proxy itself saw, the last hop of
 * `X-Forwarded-For`: whatever stands before it came from the client and can be anything.
 * @returns an IPv4 address, or the network (first 64 bits) of an IPv6 one, since one household has as many addresses as it likes;
 * `unknown` when the connection is gone.
 */
export function clientAddress(request: IncomingMessage, settings: Pick<Settings, 'isBehindTrustedProxy'>): string {
  const direct = request.socket.remoteAddress ?? ''
  if (!settings.isBehindTrustedProxy) return counted(direct)
  const header = request.headers['x-forwarded-for']
  const hops = (Array.isArray(header) ? header.join(',') : header ?? '').split(',')
  return counted(hops.at(-1)?.trim() || direct)
}

function counted(address: string): string {
  const plain = address.replace(/^::ffff:(?=\d+\.)/i, '').replace(/%.*$/, '')
  if (isIP(plain) === 4) return plain
  return isIP(plain) === 6 ? `${networkOf(plain)}::/64` : 'unknown'
}

function networkOf(address: string): string {
  const [head = '', tail] = address.split('::')
  const first = groups(head)
  const last = tail === undefined ? [] : groups(tail)
  const gap = tail === undefined ? 0 : 8 - first.length - last.length
  const all = [...first, ...Array.from({ length: Math.max(0, gap) }, () => '0'), ...last]
  return all.slice(0, 4).map(group => Number.parseInt(group, 16).toString(16)).join(':')
}

/** An IPv4 tail stands for two groups; their value plays no part in the network. */
function groups(text: string): string[] {
  return text.split(':').filter(group => group !== '').flatMap(group => group.includes('.') ? ['0', '0'] : [group])
}
