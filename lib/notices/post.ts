import http from 'node:http'
import https from 'node:https'
import { judgeTarget, readTarget, type Resolve } from '@/lib/notices/targets'

/** What came of one attempt: the status where there was an answer, and what went wrong in our own words. */
export interface Attempted { status: number | null; error: string | null }

const LIMIT_MS = 10_000

/** Errors of the network by their code; nothing that the other side wrote is repeated. */
const errorText = (error: unknown): string => {
  const code = (error as { code?: unknown } | null)?.code
  return typeof code === 'string' && /^[A-Z_0-9]{2,60}$/.test(code) ? `no answer: ${code}` : 'no answer'
}

function judgeStatus(status: number): Attempted {
  if (status >= 200 && status < 300) return { status, error: null }
  return { status, error: status >= 300 && status < 400 ? `answered ${status}; redirects are not followed` : `answered ${status}` }
}

/**
 * Sends one request to a webhook's address. The host is resolved and judged anew, the connection goes to the address judged and to no
 * other, a redirect is an answer like any other, the answer's body is not read, and all of it takes ten seconds at most.
 */
export async function post(target: string, body: string, headers: Record<string, string>, options: { privateToo: boolean; resolve?: Resolve; limitMs?: number }): Promise<Attempted> {
  const read = readTarget(target)
  if ('fault' in read) return { status: null, error: 'the address cannot be used' }
  const judged = await judgeTarget(read.url, options.privateToo, options.resolve)
  if ('refused' in judged) return { status: null, error: judged.refused === 'private' ? 'the host leads to an address that is not public' : 'the host is not found' }
  const { address, family } = judged.address
  const lookup = (_host: string, asked: { all?: boolean }, done: (error: null, found: unknown, family?: number) => void): void =>
    asked.all === true ? done(null, [{ address, family }]) : done(null, address, family)
  return new Promise((resolve) => {
    let settled = false
    const request = (read.url.protocol === 'https:' ? https : http).request(read.url, {
      method: 'POST', agent: false, lookup: lookup as never, maxHeaderSize: 16_384,
      headers: { ...headers, 'content-length': String(Buffer.byteLength(body)), connection: 'close' },
    })
    const settle = (attempted: Attempted): void => {
      if (settled) return
      settled = true
      clearTimeout(timer)
      request.destroy()
      resolve(attempted)
    }
    const limit = options.limitMs ?? LIMIT_MS
    const timer = setTimeout(() => settle({ status: null, error: `no answer within ${limit / 1000} s` }), limit)
    request.on('response', (response) => settle(judgeStatus(response.statusCode ?? 0)))
    request.on('error', (error) => settle({ status: null, error: errorText(error) }))
    request.end(body)
  })
}
