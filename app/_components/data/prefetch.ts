import { dehydrate, type DehydratedState } from '@tanstack/react-query'
import { apiKey, type ApiQuery } from './api'
import { queryClient } from './query-client'
import { notFound } from 'next/navigation'
import { serverRead } from './server-get'

export interface Prefetched { path: string; query?: ApiQuery; pages?: boolean }

/**
 * Fills the page's queries on the server, so that its first view needs no round trip from the browser. What cannot be
 * read (a refusal, a fault) is left out: the browser asks again and shows the problem itself.
 * `subject`: the first query is what the page is about, and where there is no such thing the page is not found either.
 */
export async function prefetch(wanted: readonly (readonly [path: string, query?: ApiQuery] | Prefetched)[], { subject = false } = {}): Promise<DehydratedState> {
  const client = queryClient()
  const missing = await Promise.all(
    wanted.map(async (entry) => {
      const { path, query, pages = false }: Prefetched = 'path' in entry ? entry : { path: entry[0], query: entry[1] }
      const { answer, missing } = await serverRead<unknown>(path, query)
      if (answer === null) return missing
      if (pages) client.setQueryData([...apiKey(path, query), 'pages'], { pages: [answer], pageParams: [null] })
      else client.setQueryData(apiKey(path, query), answer)
      return false
    }),
  )
  if (subject && missing[0] === true) notFound()
  return dehydrate(client)
}
