'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import { parseAsInteger, useQueryState } from 'nuqs'
import type { Edition } from '@/openapi/schemas/edition'
import { HowToCite } from '../../_components/citation'
import { CopyButton } from '../../_components/copy-button'
import { apiPath, apiQuery } from '../../_components/data/api'
import { editionsQuery } from '../../_components/data/edition'
import { count } from '../../_components/number'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton } from '../../_components/skeleton'
import { day } from '../../_components/day'
import { Comparison, EditionChoice } from './comparison'

const FORMATS = [
  { id: 'json', label: 'JSON', what: 'everything, nested' },
  { id: 'csv', label: 'CSV', what: 'one row per level, units in the names' },
  { id: 'ndjson', label: 'NDJSON', what: 'one level per line, the last line says it is complete' },
  { id: 'ecsv', label: 'ECSV', what: 'CSV with units and types in its head' },
  { id: 'arrow', label: 'Arrow', what: 'typed columns, for analysis code' },
] as const

const COUNTS: readonly { name: keyof Edition['counts']; label: string }[] = [
  { name: 'species', label: 'species' }, { name: 'levels', label: 'levels' }, { name: 'measured_g', label: 'measured Landé factors' },
  { name: 'hyperfine_constants', label: 'hyperfine constants' }, { name: 'isotopes', label: 'isotopes' }, { name: 'sources', label: 'sources' },
]

/** What it shows otherwise than another edition, the one before unless the address names one. */
function Changes({ edition }: { edition: Edition }) {
  const { data } = useQuery(editionsQuery())
  const [since, setSince] = useQueryState('since', parseAsInteger.withOptions({ history: 'push' }))
  const others = [...(data?.data ?? [])].filter(({ number }) => number !== edition.number).sort((a, b) => b.number - a.number)
  const from = since ?? edition.number - 1
  if (edition.number === 1 && others.length === 0) return <p className="prose-text">This is the first edition: all of its {count(edition.counts.levels)} levels are new.</p>
  return (
    <>
      <div className="no-print mb-5 flex flex-wrap items-end gap-x-5 gap-y-3">
        <EditionChoice label="Compared with edition" value={from} editions={others} empty onChange={(n) => void setSince(n)} />
        <Link className="link min-h-8 text-sm" href={`/editions/compare?from=${from}&to=${edition.number}`}>Compare any two</Link>
      </div>
      {from === 0 && edition.number === 1 && since === null ? <p className="prose-text">This is the first edition: all of its {count(edition.counts.levels)} levels are new. Choose a later one to see what has changed since.</p>
        : from === edition.number ? <p className="note">This is the edition itself.</p> : <Comparison from={from} to={edition.number} />}
    </>
  )
}

/** The checksum, and the two ways to make it again. */
function Checksum({ edition }: { edition: Edition }) {
  const content = apiPath(`/editions/${edition.number}/content`)
  const command = `npm run verify-edition -- ${edition.number}`
  return (
    <>
      <p className="note mb-2 max-w-[42rem]">SHA-256 of the canonical content (RFC 8785): two copies of the table with this checksum hold the same values.</p>
      <p className="flex flex-wrap items-center gap-3"><code className="text-sm [overflow-wrap:anywhere]">{edition.checksum}</code><CopyButton text={edition.checksum} label="Copy checksum" /></p>
      <dl className="facts mt-4">
        <dt>Make it again</dt>
        <dd>The SHA-256 of <a className="link" href={content} download={`lodeterm-edition-${edition.number}-content.json`}>the content file</a>, as it comes, is the checksum.</dd>
        <dt>By command</dt>
        <dd className="flex flex-wrap items-center gap-3"><code className="text-sm [overflow-wrap:anywhere]">{command}</code><CopyButton text={command} label="Copy command" /></dd>
      </dl>
    </>
  )
}

/** One edition: what it holds, its checksum, whole-table downloads, how to cite it, what changed. */
export function EditionView({ n }: { n: string }) {
  const path = `/editions/${encodeURIComponent(n)}`
  const { data, error, isPending, refetch } = useQuery(apiQuery<Edition>(path))
  if (error) return <div className="page pt-9"><ProblemView error={error} onRetry={() => void refetch()} heading="h1" /></div>
  const edition = data?.data
  return (
    <div className="page">
      <PageHead title={<>Edition {n}{edition ? <span className="text-muted">, {edition.label}</span> : null}</>} crumbs={<Link className="link" href="/editions">All editions</Link>}
        aside={<Link className="btn" href={`/?edition=${encodeURIComponent(n)}`}>Read this edition</Link>}>
        {edition ? <p>Published {day(edition.published_at)}{edition.published_by ? ` by ${edition.published_by}` : ''}. It will not change.</p> : null}
      </PageHead>
      {isPending || edition === undefined ? <Skeleton label="Loading the edition" className="h-40 w-full" /> : (
        <>
          {edition.notes ? <div className="prose-text whitespace-pre-line">{edition.notes}</div> : null}
          <dl className="mt-6 grid max-w-4xl grid-cols-2 gap-x-8 gap-y-3 sm:grid-cols-3 lg:grid-cols-6">
            {COUNTS.map(({ name, label }) => (
              <div key={name} className="flex flex-col-reverse justify-end border-t border-rule-strong pt-1.5">
                <dt className="note">{label}</dt>
                <dd className="num font-text text-2xl">{count(edition.counts[name])}</dd>
              </div>
            ))}
          </dl>
          <div className="grid gap-x-14 lg:grid-cols-2 [&>*]:min-w-0">
            <Part title="The whole table as a file">
              <ul className="max-w-3xl border-t border-rule">
                {FORMATS.map((format) => (
                  <li key={format.id} className="border-b border-rule">
                    <a className="group flex min-h-9 flex-wrap items-baseline gap-x-4 py-1.5 hover:bg-lamp-wash" href={apiPath(`${path}/levels`, { format: format.id })} download={`lodeterm-edition-${edition.number}.${format.id}`}>
                      <span className="link w-16 font-medium">{format.label}</span>
                      <span className="note">{format.what}</span>
                    </a>
                  </li>
                ))}
              </ul>
            </Part>
            <Part title="How to cite">
              <HowToCite path={path} name={`edition ${edition.number}`} />
              <p className="note mt-3 max-w-[42rem]">Please cite the sources of the values you use as well: every level names its own, and a source’s page says how.</p>
            </Part>
          </div>
          <Part title="Checksum"><Checksum edition={edition} /></Part>
          <Part title="What changed"><Changes edition={edition} /></Part>
        </>
      )}
      <RequestPanel path={path} unpinned />
    </div>
  )
}
