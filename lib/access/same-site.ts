import { Problem } from '@/lib/problem'

const SAFE = ['GET', 'HEAD', 'OPTIONS']

/**
 * Refuses a change that comes with a session cookie and not from this site's own pages. Browsers write Sec-Fetch-Site and
 * Origin themselves; a page of another site cannot change them. Sign-in is checked too, where a browser sends either:
 * nobody may be signed in to an account that is not theirs.
 */
export function checkSameSite(method: string, headers: Headers, baseUrl: string, needed = true): void {
  if (SAFE.includes(method)) return
  const site = headers.get('sec-fetch-site')
  const origin = headers.get('origin')
  if (site === null && origin === null && !needed) return
  if (site !== null ? site === 'same-origin' : origin !== null && origin === new URL(baseUrl).origin) return
  throw new Problem('cross_site', 'A change with a session cookie must come from this site itself: Sec-Fetch-Site: same-origin, or an Origin that is its address.')
}
