import { isIPv6 } from 'node:net'

const GROUPS = 8
/** Groups of an address that name its network: 64 bits. */
const NETWORK = 4

/** The eight groups of an IPv6 address in their shortest hexadecimal form. */
function groupsOf(address: string): readonly string[] {
  const [head = '', tail] = new URL(`http://[${address}]`).hostname.slice(1, -1).split('::')
  const [before, after] = [head, tail ?? ''].map(part => part.split(':').filter(Boolean)) as [string[], string[]]
  return [...before, ...Array<string>(GROUPS - before.length - after.length).fill('0'), ...after]
}

/**
 * The place that an address stands for in limits. Whoever has one IPv6 address has its whole /64 network (RFC 4291, 2.5.1: the
 * other 64 bits name the interface), so that the network counts as one place; IPv4 within IPv6 (RFC 4291, 2.5.5.2) is IPv4.
 */
export function placeOfAddress(address: string): string {
  const [bare = ''] = address.split('%')
  const mapped = /^::ffff:(\d+(?:\.\d+){3})$/i.exec(bare)?.[1]
  if (mapped) return mapped
  return isIPv6(bare) ? `${groupsOf(bare).slice(0, NETWORK).join(':')}::/64` : address
}
