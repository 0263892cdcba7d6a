import dns from 'node:dns/promises'
import net from 'node:net'
import ipaddr from 'ipaddr.js'
import { bodyProblem } from '@/lib/problem'

export interface Address { address: string; family: 4 | 6 }

/** Ranges that count as unicast by their form and still do not belong to hosts of the public internet. */
const NOT_PUBLIC = ['64:ff9b:1::/48', 'fec0::/10', '::/96', '100::/64', '2001:db8::/32', '3fff::/20', '192.0.0.0/24', '192.88.99.0/24', '198.18.0.0/15'].map((range) => ipaddr.parseCIDR(range))

/**
 * Whether an IP address belongs to the public internet: unicast, of no special range, and carrying no other address inside
 * (IPv4-mapped, NAT64, 6to4, Teredo), behind which a private one could hide.
 */
export function isPublicAddress(text: string): boolean {
  if (net.isIP(text) === 0) return false
  const address = ipaddr.parse(text)
  if (address.range() !== 'unicast') return false
  // of IPv6 only 2000::/3 has been given out
  if (address.kind() === 'ipv6' && ((address.toByteArray()[0] ?? 0) & 0xe0) !== 0x20) return false
  return !NOT_PUBLIC.some(([range, bits]) => range.kind() === address.kind() && address.match([range, bits] as never))
}

/** The address of a webhook, or why it is none. The URL is read as browsers read it: decimal and octal hosts become what they mean. */
export function readTarget(text: string): { url: URL } | { fault: string } {
  let url: URL
  try {
    url = new URL(text)
  } catch {
    return { fault: 'This is not an address; write it like https://hooks.example.org/lodeterm.' }
  }
  if (url.protocol !== 'https:' && url.protocol !== 'http:') return { fault: `A webhook goes to http or https; ${url.protocol}// is neither.` }
  if (url.username !== '' || url.password !== '') return { fault: 'Leave name and password out of the address; the signature proves the sender.' }
  if (url.hostname === '') return { fault: 'The address names no host.' }
  url.hash = ''
  if (url.href.length > 2000) return { fault: 'The address is longer than 2000 characters.' }
  return { url }
}

const RESOLVE_MS = 4_000
export type Resolve = (host: string) => Promise<readonly { address: string; family: number }[]>
const resolveAll: Resolve = (host) => dns.lookup(host, { all: true, verbatim: true })

export type Judged = { address: Address } | { refused: 'unresolved' | 'private' }

/**
 * Resolves a target's host once and judges every address it has: one that is not public refuses all of them. The address given back
 * is the one to connect to, so that a name that changes its mind in between leads nowhere.
 */
export async function judgeTarget(url: URL, privateToo: boolean, resolve: Resolve = resolveAll): Promise<Judged> {
  const host = url.hostname.replace(/^\[(.*)\]$/, '$1')
  const literal = net.isIP(host)
  let found: readonly { address: string; family: number }[]
  if (literal !== 0) found = [{ address: host, family: literal }]
  else {
    let timer: NodeJS.Timeout | undefined
    const late = new Promise<never>((_, reject) => { timer = setTimeout(() => reject(new Error('late')), RESOLVE_MS) })
    found = await Promise.race([resolve(host), late]).catch(() => []).finally(() => clearTimeout(timer))
  }
  const [first] = found
  if (first === undefined) return { refused: 'unresolved' }
  if (!privateToo && !found.every(({ address }) => isPublicAddress(address))) return { refused: 'private' }
  return { address: { address: first.address, family: first.family === 6 ? 6 : 4 } }
}

/** The address as it is kept, or the refusal that names its field. */
export async function requireTarget(text: string, privateToo: boolean): Promise<string> {
  const read = readTarget(text)
  if ('fault' in read) throw bodyProblem('/url', 'webhook_url_malformed', read.fault)
  const judged = await judgeTarget(read.url, privateToo)
  if ('address' in judged) return read.url.href
  if (judged.refused === 'unresolved') throw bodyProblem('/url', 'webhook_target_unresolved', `The host ${read.url.hostname} is not found.`)
  throw bodyProblem('/url', 'webhook_target_private', `The host ${read.url.hostname} leads to an address that is not public, where this server sends nothing.`)
}
