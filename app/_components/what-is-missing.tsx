'use client'
import { useQuery } from '@tanstack/react-query'
import { usePathname, useSearchParams } from 'next/navigation'
import { apiQuery } from './data/api'
import { ProblemView } from './problem-view'

/** Pages that are about one thing, and where the API tells of it. */
const SUBJECTS = { levels: '/levels', lines: '/transitions', species: '/species', sources: '/sources', editions: '/editions' } as const
const isSubject = (room: string | undefined): room is keyof typeof SUBJECTS => room !== undefined && Object.hasOwn(SUBJECTS, room)

/** What the API says of the thing that this address names: which names are near it, or in which editions to look. */
export function WhatIsMissing() {
  const [, room, name] = usePathname().split('/')
  const edition = useSearchParams().get('edition') ?? undefined
  const asked = isSubject(room) && name !== undefined && name !== ''
  const path = asked ? `${SUBJECTS[room]}/${name}` : ''
  const { error } = useQuery({ ...apiQuery<unknown>(path, room === 'editions' ? undefined : { edition }), enabled: asked, retry: false })
  return error === null ? null : <div className="mt-6"><ProblemView error={error} /></div>
}
