'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import { useSyncExternalStore } from 'react'
import type { Change, Edition } from '@/openapi/schemas/edition'
import { CopyButton } from '../../_components/copy-button'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPath, apiQuery } from '../../_components/data/api'
import { levelPage } from '../../_components/names'
import { count, plural } from '../../_components/number'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton } from '../../_components/skeleton'
import { day } from '../../_components/day'

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

const never = () => () => undefined
const useOrigin = (): string => useSyncExternalStore(never, () => window.location.origin, () => '')

function Cite({ edition }: { edition: Edition }) {
  const origin = useOrigin()
  const text = `Lodeterm, a reviewed table of atomic levels, edition ${edition.number} (${edition.label}), published ${day(edition.published_at)}, ${origin}/editions/${edition.number}, SHA-256 ${edition.checksum}.`
  return (
    <>
      <blockquote className="prose-text border-l-2 border-lamp pl-4 [overflow-wrap:anywhere]">{text}</blockquote>
      <p className="note mt-3 max-w-[42rem]">Please cite the sources of the values you use as well: every level names its own.</p>
      <div className="mt-3"><CopyButton text={text} label="Copy citation" /></div>
    </>
  )
}

const fieldText = (value: unknown): string => (value === null || value === undefined ? 'nothing' : typeof value === 'object' ? JSON.stringify(value) : String(value))

function Changes({ edition }: { edition: Edition }) {
  const first = edition.number === 1
  const { data, error, isPending, refetch } = useQuery({ ...apiQuery<Change[]>(`/editions/${edition.number}/changes`, { limit: 200 }), enabled: !first })
  if (first) return <p className="prose-text">This is the first edition: all of its {count(edition.counts.levels)} levels are new.</p>
  if (isPending) return <Skeleton label="Loading the changes" className="h-20 w-full" />
  if (error) return <ProblemView error={error} onRetry={() => void refetch()} heading="h3" />
  const columns: Column<Change>[] = [
    { name: 'level', header: 'Level', rowHeader: true, value: (row) => row.subject, sort: true, cell: (row) => <Link className="link" href={`${levelPage(row.subject)}?edition=${edition.number}`}>{row.level}</Link> },
    { name: 'action', header: 'What happened', value: (row) => row.action, sort: true },
    {
      name: 'fields', header: 'Values', wrap: true, value: (row) => row.fields.map((field) => `${field.field}: ${fieldText(field.before)} -> ${fieldText(field.after)}`).join('; '),
      cell: (row) => (row.action === 'created' ? <span className="text-muted">new in this edition</span> : (
        <ul>{row.fields.map((field) => <li key={field.field}><code className="mr-2 text-lamp-ink">{field.field}</code>{fieldText(field.before)} → {fieldText(field.after)}</li>)}</ul>
      )),
    },
  ]
  if (data.data.length === 0) return <p className="note">Nothing differs from the edition before.</p>
  return <DataTable columns={columns} rows={data.data} rowKey={(row) => `${row.kind} ${row.subject}`} caption={`Changes in edition ${edition.number}`} hideCaption summary={data.page?.next_cursor ? `The first ${data.data.length} changes` : plural(data.data.length, 'change')} />
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
            <Part title="How to cite"><Cite edition={edition} /></Part>
          </div>
          <Part title="Checksum">
            <p className="note mb-2">SHA-256 of the canonical content: two copies of the table with this checksum hold the same values.</p>
            <p className="flex flex-wrap items-center gap-3"><code className="text-sm [overflow-wrap:anywhere]">{edition.checksum}</code><CopyButton text={edition.checksum} label="Copy checksum" /></p>
          </Part>
          <Part title="What changed"><Changes edition={edition} /></Part>
        </>
      )}
      <RequestPanel path={path} unpinned />
    </div>
  )
}
