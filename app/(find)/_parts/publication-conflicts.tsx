'use client'
import Link from 'next/link'
import type { PublicationConflict } from '@/openapi/schemas/edition'
import { Notice } from '../../_components/notice'
import { plural } from '../../_components/number'

/** What keeps the amendments from being published together, each with where to go to mend it. */
export function Conflicts({ conflicts }: { conflicts: readonly PublicationConflict[] }) {
  return (
    <Notice tone="bad" role="alert" title={`${plural(conflicts.length, 'conflict')} ${conflicts.length === 1 ? 'stands' : 'stand'} in the way`}>
      <ul className="list-disc space-y-2 pl-5">
        {conflicts.map((conflict, at) => (
          <li key={at}>
            {conflict.detail}
            <span className="note block">
              {conflict.changes.map(({ amendment, change, subject }, place) => (
                <span key={change}>{place > 0 ? ' · ' : ''}<Link className="link" href={`/curate/${amendment.id}`}>{subject} in “{amendment.title}”</Link></span>
              ))}
            </span>
          </li>
        ))}
      </ul>
      <p>Nothing can be published until one of them is edited and accepted again, or withdrawn.</p>
    </Notice>
  )
}
