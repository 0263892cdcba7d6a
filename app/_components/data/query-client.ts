import { QueryClient, isServer } from '@tanstack/react-query'
import { ApiError } from './api'

/** Waiting helps only where nothing was decided: no answer, a 5xx, never a refusal. */
const mayRetry = (count: number, error: Error): boolean =>
  count < 2 && error instanceof ApiError && (error.problem.status === 0 || error.problem.status >= 500)

const make = () =>
  new QueryClient({
    defaultOptions: {
      queries: { staleTime: 60_000, gcTime: 10 * 60_000, retry: isServer ? false : mayRetry, refetchOnWindowFocus: false },
    },
  })

let inBrowser: QueryClient | null = null

/** One client per request on the server, one for the life of the tab in the browser. */
export function queryClient(): QueryClient {
  if (isServer) return make()
  inBrowser ??= make()
  return inBrowser
}
