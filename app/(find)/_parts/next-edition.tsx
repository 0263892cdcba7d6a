'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import type { NextEdition } from '@/openapi/schemas/edition'
import type { Account } from '@/openapi/schemas/session'
import { apiQuery } from '../../_components/data/api'
import { EmptyState } from '../../_components/empty-state'
import { Notice } from '../../_components/notice'
import { count, plural } from '../../_components/number'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton } from '../../_components/skeleton'
import { Conflicts } from './publication-conflicts'
import { PublishForm } from './publish-form'

export const nextEditionQuery = () => ({ ...apiQuery<NextEdition>('/editions/next'), staleTime: 0 })

const KINDS = [['level', 'levels'], ['source', 'sources'], ['species', 'species'], ['isotope', 'isotopes'], ['hyperfine', 'hyperfine constants']] as const
const ACTIONS = [['create', 'new'], ['replace', 'corrected'], ['retire', 'retired']] as const

function Counts({ counts }: { counts: NextEdition['counts'] }) {
  const kinds = KINDS.filter(([kind]) => ACTIONS.some(([action]) => counts[kind][action] > 0))
  return (
    <dl className="flex flex-wrap gap-x-10 gap-y-3">
      {kinds.map(([kind, name]) => (
        <div key={kind} className="border-t border-rule-strong pt-1.5">
          <dt className="note">{name}</dt>
          <dd className="font-text text-lg">{ACTIONS.filter(([action]) => counts[kind][action] > 0).map(([action, word]) => `${count(counts[kind][action])} ${word}`).join(', ')}</dd>
        </div>
      ))}
    </dl>
  )
}

function Amendments({ amendments }: { amendments: NextEdition['amendments'] }) {
  return (
    <ul className="max-w-4xl border-t border-rule">
      {amendments.map((amendment) => (
        <li key={amendment.id} className="border-b border-rule py-2.5">
          <Link className="link font-medium" href={`/curate/${amendment.id}`}>{amendment.title}</Link>
          <span className="note block">{plural(amendment.changes, 'change')} by {amendment.author.name}{amendment.reviewer === null ? '' : `, accepted by ${amendment.reviewer}`}, version {amendment.version}</span>
        </li>
      ))}
    </ul>
  )
}

/** What the next edition would be. An admin publishes it here; curators see the same. */
export function NextEditionView({ role }: { role: Account['role_in_force'] }) {
  const may = role !== 'reader'
  const { data, error, isPending, refetch } = useQuery({ ...nextEditionQuery(), enabled: may })
  const next = data?.data
  return (
    <div className="page">
      <PageHead title={next ? `Edition ${next.number}` : 'Next edition'} crumbs={<Link className="link" href="/editions">All editions</Link>}>
        <p>What is accepted and waits to be published, checked together as one table.</p>
      </PageHead>
      {!may ? (
        <Notice title="This is for curators"><p>You are signed in as a reader: what is published you can read without it.</p></Notice>
      ) : error ? <ProblemView error={error} onRetry={() => void refetch()} /> : isPending || next === undefined ? <Skeleton label="Checking what is accepted" className="h-40 w-full" /> : next.amendments.length === 0 ? (
        <EmptyState title="Nothing waits to be published"><p>An amendment is published after a colleague has accepted it. <Link className="link" href="/curate">Curate</Link> shows those on their way.</p></EmptyState>
      ) : (
        <>
          {next.conflicts.length > 0 ? <div className="mb-6"><Conflicts conflicts={next.conflicts} /></div> : null}
          <Counts counts={next.counts} />
          <Part title="Amendments in it" aside={plural(next.amendments.length, 'amendment')}><Amendments amendments={next.amendments} /></Part>
          <Part title={role === 'admin' ? 'Publish' : 'Notes'}>
            {role === 'admin' ? <PublishForm key={next.amendments.map(({ id, version }) => `${id} ${version}`).join()} next={next} onLookAgain={() => void refetch()} /> : (
              <>
                <div className="prose-text whitespace-pre-line [overflow-wrap:anywhere]">{next.notes}</div>
                <p className="note mt-4">An admin publishes it, and may word the notes otherwise.</p>
              </>
            )}
          </Part>
        </>
      )}
      {may ? <RequestPanel path="/editions/next" unpinned /> : null}
    </div>
  )
}
