'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import type { LevelRevision } from '@/openapi/schemas/edition'
import type { LevelDetail } from '@/openapi/schemas/level'
import { ComparedValues } from '@/app/_components/compared-values'
import { apiQuery } from '@/app/_components/data/api'
import { day } from '@/app/_components/day'
import { plural } from '@/app/_components/number'
import { Part } from '@/app/_components/page-head'
import { ProblemView } from '@/app/_components/problem-view'
import { Skeleton } from '@/app/_components/skeleton'

const WORDS: Record<LevelRevision['action'], string> = { created: 'entered the table', replaced: 'corrected', retired: 'retired', restored: 'taken up again' }

/** By whose amendment, and with what words. */
function Origin({ revision }: { revision: LevelRevision }) {
  const { amendment, authors, reviewer, reason, comment } = revision
  if (amendment === null) return <p className="note">Loaded with the installation.</p>
  return (
    <>
      <p className="note">By the amendment “{amendment.title}”{authors.length > 0 ? ` of ${authors.join(', ')}` : ''}{reviewer === null ? '' : `, accepted by ${reviewer}`}.</p>
      {reason ? <p className="prose-text mt-1">{reason}</p> : null}
      {comment ? <p className="prose-text mt-1">{comment}</p> : null}
    </>
  )
}

/** Every revision of the level, the newest first: since which edition, what changed, who answers for it. */
export function HistoryPart({ level }: { level: LevelDetail }) {
  const { data, error, isPending, refetch } = useQuery(apiQuery<LevelRevision[]>(`/levels/${level.id}/history`))
  const revisions = data?.data ?? []
  return (
    <Part title="History" aside={data ? plural(revisions.length, 'revision') : undefined}>
      {error ? <ProblemView error={error} onRetry={() => void refetch()} heading="h3" /> : isPending ? <Skeleton label="Loading the history" className="h-16 max-w-3xl" /> : (
        <ol className="max-w-4xl border-t border-rule">
          {revisions.map((revision) => (
            <li key={revision.revision} className={`grid gap-x-6 gap-y-1 border-b border-rule py-3 sm:grid-cols-[9.5rem_minmax(0,1fr)] ${revision.revision === level.revision ? '' : 'text-[0.9375rem]'}`}>
              <div>
                <Link className="link" href={`/levels/${level.id}?edition=${revision.edition}`}>Edition {revision.edition}</Link>
                {revision.revision === level.revision ? <span className="ml-2 text-xs text-good">shown here</span> : null}
                <span className="note block">{day(revision.published_at)}</span>
              </div>
              <div className="min-w-0">
                <p>Revision {revision.revision}: {WORDS[revision.action]}{revision.until_edition === null ? '' : `, in force up to edition ${revision.until_edition - 1}`}</p>
                {revision.fields.length > 0 ? <div className="my-1.5"><ComparedValues fields={revision.fields} /></div> : null}
                <Origin revision={revision} />
              </div>
            </li>
          ))}
        </ol>
      )}
    </Part>
  )
}
