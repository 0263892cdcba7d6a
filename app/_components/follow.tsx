'use client'
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query'
import { Bell, BellRing } from 'lucide-react'
import { usePathname, useRouter } from 'next/navigation'
import { useState } from 'react'
import type { Follow as Followed } from '@/openapi/schemas/notices'
import { ApiError, apiQuery, apiSend, problemOf } from './data/api'

/**
 * Follows a species, level or line, or stops. What is followed already comes with the page; it is never asked for from here, since a
 * stranger's browser would be refused on every page. A stranger who presses is asked to sign in.
 */
export function Follow({ subject }: { subject: string }) {
  const client = useQueryClient()
  const path = usePathname()
  const router = useRouter()
  const [said, setSaid] = useState('')
  const query = apiQuery<Followed[]>('/follows', { subject })
  const { data } = useQuery({ ...query, enabled: false })
  const followed = data?.data.find((one) => one.subject === subject)
  const press = useMutation({
    mutationFn: async () => {
      if (followed === undefined) return (await apiSend<Followed>('POST', '/follows', { subject })).data
      await apiSend<null>('DELETE', `/follows/${followed.id}`, undefined, { 'if-match': followed.etag })
      return null
    },
    onSuccess: (now) => {
      client.setQueryData(query.queryKey, { data: now === null ? [] : [now], meta: {} })
      setSaid(now === null ? 'No longer followed' : 'A mail will tell you when an edition changes it')
    },
    onError: (error) => {
      if (error instanceof ApiError && error.problem.status === 401) router.push(`/sign-in?next=${encodeURIComponent(path)}`)
      else setSaid(problemOf(error).detail)
    },
  })
  const Icon = followed === undefined ? Bell : BellRing
  return (
    <span className="no-print inline-flex flex-wrap items-center gap-x-3 gap-y-1">
      <button type="button" className="btn" aria-pressed={followed !== undefined} disabled={press.isPending} onClick={() => press.mutate()}>
        <Icon size={15} aria-hidden="true" className={followed === undefined ? 'text-muted' : 'text-lamp-ink'} />
        {followed === undefined ? 'Follow' : 'Following'}
      </button>
      <span role="status" className="note max-w-56">{said}</span>
    </span>
  )
}
