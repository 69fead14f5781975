import { isIPv6 } from 'node:net'
import type { H3Event } from 'h3'
import { getRequestHeader } from 'h3'

/** How many proxies of our own stand in front; 0 unless `TRUSTED_PROXY_HOPS` says otherwise. */
function trustedHops(): number {
  const hops = Number(process.env.TRUSTED_PROXY_HOPS ?? 0)
  return Number.isInteger(hops) && hops >= 0 && hops <= 10 ? hops : 0
}

/** The first four groups of an IPv6 address: one household or host may change the rest at will. */
function networkOf(address: string): string {
  const [head = '', tail] = address.split('::')
  const groups = head === '' ? [] : head.split(':')
  const rest = tail === undefined || tail === '' ? [] : tail.split(':')
  const filled = [
    ...groups,
    ...Array<string>(Math.max(0, 8 - groups.length - rest.length)).fill('0'),
    ...rest,
  ]
  return `${filled.slice(0, 4).join(':')}::/64`
}

/**
 * The address a request comes from, for counting: that of the connection, or, behind our own proxies, the entry the
 * outermost of them wrote. Entries further left are whatever the caller typed and are never read.
 */
export function peerAddress(event: H3Event): string {
  const hops = trustedHops()
  const forwarded = (getRequestHeader(event, 'x-forwarded-for') ?? '').split(',').map((part) => part.trim())
  const peer = hops > 0 ? forwarded.at(-hops) : undefined
  const address = (peer ?? event.node.req.socket.remoteAddress ?? 'unknown').replace(/^::ffff:/i, '')
  return isIPv6(address) ? networkOf(address.toLowerCase()) : address
}
