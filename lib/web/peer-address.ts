import { randomBytes } from 'node:crypto'
import { subscribe } from 'node:diagnostics_channel'
import type { IncomingMessage } from 'node:http'
import { isIPv4 } from 'node:net'

// The framework hands on headers, not the connection. The address of the connection travels in a header whose
// name is drawn anew by each process, so that no client can send it.
const place = Symbol.for('evenlot.peer-header')
const kept = globalThis as { [place]?: string }

/** Notes on each request, as the server receives it, the address it really came from. Called once, at start. */
export function notePeerAddresses(): void {
  if (kept[place]) return
  const name = (kept[place] = `x-peer-${randomBytes(12).toString('hex')}`)
  subscribe('http.server.request.start', (message) => {
    const { request } = message as { request: IncomingMessage }
    request.headers[name] = request.socket.remoteAddress ?? ''
  })
}

/** The header's name in this process, where addresses are noted. */
export function peerHeaderName(): string | undefined {
  return kept[place]
}

/**
 * Where a request came from, for counting: the connection's address, or, when that is a proxy of ours, the address
 * the proxy says it had. What a client says of itself in a header is never believed. Null when not known.
 */
export function readPeer(headers: Pick<Headers, 'get'>, trustedProxies: readonly string[]): string | null {
  const name = peerHeaderName()
  const peer = plain(name ? (headers.get(name) ?? '') : '')
  if (!peer) return null
  if (!trustedProxies.includes(peer)) return block(peer)
  const lastHop = headers.get('x-forwarded-for')?.split(',').at(-1)?.trim()
  return lastHop ? block(plain(lastHop)) : block(peer)
}

/** An IPv4 address that arrives by an IPv6 socket is written as the IPv4 address it is. */
function plain(address: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address)?.[1]
  return mapped ?? address
}

/** One household or office holds a whole /64 of IPv6 addresses, and counts as one. */
function block(address: string): string {
  if (isIPv4(address) || !address.includes(':')) return address
  const [head = '', tail] = address.split('::')
  const left = head.split(':').filter(Boolean)
  const right = (tail ?? '').split(':').filter(Boolean)
  const groups =
    tail === undefined
      ? left
      : [...left, ...Array<string>(8 - left.length - right.length).fill('0'), ...right]
  return `${groups.slice(0, 4).join(':')}::/64`
}
