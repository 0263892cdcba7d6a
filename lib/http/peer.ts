import { subscribe } from 'node:diagnostics_channel'
import type { IncomingMessage } from 'node:http'
import { shared } from '@/lib/access/shared'

/** Field in which the address of the connection itself reaches the handlers; what a client sends under this name is overwritten. */
const PEER_FIELD = 'x-lodeterm-peer'

/**
 * A path whose percent-encoding is not UTF-8, with its percent signs taken as what they are. The framework answers such a
 * path with a 500 before any handler sees it; so it reaches one, which finds no such thing.
 */
export function decodable(url: string): string {
  const mark = url.indexOf('?')
  const path = mark < 0 ? url : url.slice(0, mark)
  if (!path.includes('%')) return url
  try {
    decodeURIComponent(path)
    return url
  } catch {
    return path.replaceAll('%', '%25') + (mark < 0 ? '' : url.slice(mark))
  }
}

const watch = shared('peer', () => ({ on: false }))

/**
 * Writes the address of each request's connection into its fields before anyone reads them, and makes every path decodable. The framework shows handlers
 * only X-Forwarded-For, which a client may write as it likes.
 */
export function watchPeers(): void {
  if (watch.on) return
  watch.on = true
  subscribe('http.server.request.start', (message) => {
    const { request } = message as { request: IncomingMessage }
    request.headers[PEER_FIELD] = request.socket.remoteAddress ?? ''
    request.url = decodable(request.url ?? '/')
    // the framework cannot make a Request of these two and answers 500; sent where nothing is, they get a problem
    if (request.method === 'TRACE' || request.method === 'TRACK') {
      request.method = 'GET'
      request.url = '/api/v1/no-such-method'
    }
  })
}

const plain = (address: string): string => address.trim().replace(/^::ffff:(?=\d+\.)/, '').replace(/^\[(.*)\]$/, '$1')

/**
 * The address that a request came from: that of the connection, or, where that is a configured proxy, the last one in
 * X-Forwarded-For that is not a configured proxy itself.
 */
export function clientAddress(headers: Headers, trustedProxies: readonly string[]): string {
  const peer = watch.on ? plain(headers.get(PEER_FIELD) ?? '') : ''
  if (!trustedProxies.includes(peer)) return peer === '' ? 'unknown' : peer
  const hops = (headers.get('x-forwarded-for') ?? '').split(',').map(plain).filter((hop) => hop !== '')
  return hops.findLast((hop) => !trustedProxies.includes(hop)) ?? peer
}
