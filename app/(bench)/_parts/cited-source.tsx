'use client'
import { useQuery } from '@tanstack/react-query'
import type { Evidence } from '@/openapi/schemas/common'
import type { Source } from '@/openapi/schemas/source'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { SourceRef } from '@/app/_components/source-ref'

/** A source by its key, how far the value was checked against it, and the reference in full. */
export function CitedSource({ source, evidence }: { source: string | null; evidence: Evidence | null }) {
  const { param: edition } = useEdition()
  const { data } = useQuery({ ...apiQuery<Source>(`/sources/${encodeURIComponent(source ?? '')}`, { edition }), enabled: source !== null })
  return (
    <>
      <SourceRef source={source} evidence={evidence} />
      {data ? <span className="note block max-w-[44rem]">{data.data.citation}</span> : null}
    </>
  )
}
