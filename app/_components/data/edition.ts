'use client'
import { useQuery } from '@tanstack/react-query'
import { parseAsInteger, useQueryState } from 'nuqs'
import type { Edition } from '@/openapi/schemas/edition'
import { apiQuery } from './api'

export const editionsQuery = () => apiQuery<Edition[]>('/editions')

export interface EditionInForce {
  /** The number in the address, or null: the latest. */
  pinned: number | null
  /** The number in force, null until it is known. */
  number: number | null
  latest: number | null
  /** What to send as `edition`: nothing for the latest. */
  param: number | undefined
  /** Adds the pinned edition to a page address. */
  href: (path: string) => string
}

/** The edition that this view reads: `?edition=N` of the address, else the latest. */
export function useEdition(): EditionInForce {
  const [pinned] = useQueryState('edition', parseAsInteger)
  const { data } = useQuery(editionsQuery())
  const latest = data ? data.data.reduce((top, edition) => Math.max(top, edition.number), 0) || null : null
  return {
    pinned,
    latest,
    number: pinned ?? latest,
    param: pinned ?? undefined,
    href: (path) => (pinned === null ? path : `${path}${path.includes('?') ? '&' : '?'}edition=${pinned}`),
  }
}
