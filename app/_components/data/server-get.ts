import { headers } from 'next/headers'
import { apiPath, readAnswer, type ApiAnswer, type ApiQuery } from './api'

type Handler = (request: Request) => Promise<Response>

/** The reads that pages begin with, each answered by its own route handler: the same checks, limits and shapes as over the wire. */
const READS: readonly { path: RegExp; open: () => Promise<{ GET: Handler }> }[] = [
  { path: /^\/editions$/, open: () => import('@/app/api/v1/editions/route') },
  { path: /^\/editions\/[^/]+$/, open: () => import('@/app/api/v1/editions/[n]/route') },
  { path: /^\/editions\/[^/]+\/changes$/, open: () => import('@/app/api/v1/editions/[n]/changes/route') },
  { path: /^\/find$/, open: () => import('@/app/api/v1/find/route') },
  { path: /^\/species$/, open: () => import('@/app/api/v1/species/route') },
  { path: /^\/species\/[^/]+$/, open: () => import('@/app/api/v1/species/[species]/route') },
  { path: /^\/sources$/, open: () => import('@/app/api/v1/sources/route') },
  { path: /^\/sources\/[^/]+$/, open: () => import('@/app/api/v1/sources/[key]/route') },
  { path: /^\/levels$/, open: () => import('@/app/api/v1/levels/route') },
  { path: /^\/levels\/[^/]+$/, open: () => import('@/app/api/v1/levels/[level]/route') },
  { path: /^\/levels\/[^/]+\/g-factor$/, open: () => import('@/app/api/v1/levels/[level]/g-factor/route') },
  { path: /^\/levels\/[^/]+\/transitions$/, open: () => import('@/app/api/v1/levels/[level]/transitions/route') },
  { path: /^\/transitions$/, open: () => import('@/app/api/v1/transitions/route') },
  { path: /^\/transitions\/[^/]+$/, open: () => import('@/app/api/v1/transitions/[transition]/route') },
  { path: /^\/transitions\/[^/]+\/components$/, open: () => import('@/app/api/v1/transitions/[transition]/components/route') },
  { path: /^\/follows$/, open: () => import('@/app/api/v1/follows/route') },
  { path: /^\/me$/, open: () => import('@/app/api/v1/me/route') },
  { path: /^\/me\/tasks$/, open: () => import('@/app/api/v1/me/tasks/route') },
  { path: /^\/amendments$/, open: () => import('@/app/api/v1/amendments/route') },
  { path: /^\/amendments\/[^/]+$/, open: () => import('@/app/api/v1/amendments/[id]/route') },
]

/** What a visitor's request says about who they are and where they come from; nothing else of it concerns the API. */
const CARRIED = ['cookie', 'x-lodeterm-peer', 'x-forwarded-for', 'user-agent'] as const

/** `missing`: the API says that there is no such thing. An answer that could not be had for other reasons is null without it. */
export interface ServerAnswer<T> { answer: ApiAnswer<T> | null; missing: boolean }

/** A name of the wrong form names nothing. */
const MISNAMED = /^((species|level|transition|identifier|encoding)_malformed|nul_byte)$/

/** Reads the API on the server, within the process, as the visitor. */
export async function serverRead<T>(path: string, query?: ApiQuery): Promise<ServerAnswer<T>> {
  const read = READS.find((candidate) => candidate.path.test(path))
  if (read === undefined) return { answer: null, missing: false }
  // Outside of the try: at build time this throws to say that the page belongs to a request and is not made beforehand.
  const incoming = await headers()
  try {
    const sent = new Headers({ accept: 'application/json' })
    for (const name of CARRIED) {
      const value = incoming.get(name)
      if (value !== null) sent.set(name, value)
    }
    const { GET } = await read.open()
    const response = await GET(new Request(`http://127.0.0.1${apiPath(path, query)}`, { headers: sent }))
    if (!response.ok) {
      const { status, code } = (await response.json()) as { status: number; code: string }
      return { answer: null, missing: status === 404 || MISNAMED.test(code) }
    }
    return { answer: await readAnswer<ApiAnswer<T>>(response), missing: false }
  } catch {
    return { answer: null, missing: false }
  }
}

/** The same where only the answer matters: null where the API refuses or fails, and the browser then asks itself and shows the problem. */
export const serverGet = async <T>(path: string, query?: ApiQuery): Promise<ApiAnswer<T> | null> => (await serverRead<T>(path, query)).answer
