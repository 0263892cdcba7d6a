'use client'
import Link from 'next/link'
import { useEdition } from './data/edition'
import { Evidence } from './evidence'
import type { Evidence as Grade } from '@/openapi/schemas/common'

/** Link to a source's page, with how far the value was checked against it. */
export function SourceRef({ source, evidence, children }: { source: string | null; evidence?: Grade | null; children?: React.ReactNode }) {
  const { href } = useEdition()
  if (source === null) return <span className="text-muted">no source</span>
  return (
    <span className="inline-flex flex-wrap items-baseline gap-x-2">
      <Link className="link" href={href(`/sources/${encodeURIComponent(source)}`)}>
        {children ?? source}
      </Link>
      {evidence ? <Evidence grade={evidence} /> : null}
    </span>
  )
}
