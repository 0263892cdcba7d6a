'use client'
import Link from 'next/link'
import { useInfiniteQuery } from '@tanstack/react-query'
import { parseAsString, parseAsStringLiteral, useQueryStates } from 'nuqs'
import type { Change, Edition } from '@/openapi/schemas/edition'
import { ComparedValues } from '../../_components/compared-values'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages, apiPath } from '../../_components/data/api'
import { levelPage, speciesPage, speciesText } from '../../_components/names'
import { count, plural } from '../../_components/number'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'

const KINDS = ['level', 'source', 'species', 'isotope', 'hyperfine'] as const
const ACTIONS = ['created', 'replaced', 'retired', 'restored', 'absent'] as const
const KIND_WORDS: Record<Change['kind'], string> = { level: 'levels', source: 'sources', species: 'species', isotope: 'isotopes', hyperfine: 'hyperfine constants' }
const ACTION_WORDS: Record<Change['action'], string> = { created: 'new', replaced: 'changed', retired: 'retired', restored: 'not yet retired', absent: 'not there yet' }

type Counts = Partial<Record<Change['kind'], Partial<Record<Change['action'], number>>>>

/** What the comparison comes to, kind by kind; each number narrows the list below. */
function CountsLine({ counts, choose }: { counts: Counts; choose: (kind: Change['kind'], action: Change['action']) => void }) {
  const kinds = KINDS.filter((kind) => counts[kind] !== undefined)
  if (kinds.length === 0) return null
  return (
    <ul className="mb-4 flex flex-wrap gap-x-8 gap-y-2">
      {kinds.map((kind) => (
        <li key={kind}>
          <span className="note mr-2">{KIND_WORDS[kind]}</span>
          {ACTIONS.filter((action) => counts[kind]?.[action] !== undefined).map((action) => (
            <button key={action} type="button" className="link mr-3 inline-flex min-h-6 items-center" onClick={() => choose(kind, action)}>
              <span className="num mr-1">{count(counts[kind]?.[action] ?? 0)}</span>{ACTION_WORDS[action]}
            </button>
          ))}
        </li>
      ))}
    </ul>
  )
}

function Subject({ change, edition }: { change: Change; edition: number }) {
  if (change.level !== null) return <Link className="link" href={`${levelPage(change.level)}?edition=${edition}`}>{change.subject}</Link>
  if (change.kind === 'source') return <Link className="link" href={`/sources/${change.subject}?edition=${edition}`}>{change.subject}</Link>
  if (change.species !== null) return <Link className="link" href={`${speciesPage(change.species)}?edition=${edition}`}>{change.kind === 'species' ? speciesText(change.subject) : change.subject}</Link>
  return change.subject
}

const plain = (value: unknown): string => (value === null || value === undefined ? 'nothing' : typeof value === 'object' ? JSON.stringify(value) : String(value))

function columnsFor(from: number, to: number): Column<Change>[] {
  return [
    { name: 'subject', header: 'What', rowHeader: true, value: (row) => row.subject, cell: (row) => <Subject change={row} edition={row.action === 'absent' ? from : to} /> },
    { name: 'kind', header: 'Kind', value: (row) => row.kind, only: 'copy' },
    { name: 'action', header: 'What happened', value: (row) => row.action, cell: (row) => ACTION_WORDS[row.action] },
    {
      name: 'values', header: `Values in edition ${from} → edition ${to}`, wrap: true, value: (row) => row.fields.map(({ field, before, after }) => `${field}: ${plain(before)} -> ${plain(after)}`).join('; '),
      cell: (row) => row.action === 'absent' ? <span className="text-muted">in edition {from} only</span> : <ComparedValues fields={row.fields} onlyAfter={row.action === 'created'} />,
    },
  ]
}

/** What edition `to` shows otherwise than edition `from`: counts, filters, and value by value. The filters stand in the address. */
export function Comparison({ from, to }: { from: number; to: number }) {
  const [filter, setFilter] = useQueryStates({ kind: parseAsStringLiteral(KINDS), action: parseAsStringLiteral(ACTIONS), species: parseAsString }, { history: 'push' })
  const query = { since: from, kind: filter.kind, action: filter.action, species: filter.species }
  const { data, error, isPending, refetch, hasNextPage, fetchNextPage, isFetchingNextPage } = useInfiniteQuery(apiPages<Change>(`/editions/${to}/changes`, query))
  const first = data?.pages[0]
  const rows = data?.pages.flatMap((page) => page.data) ?? []
  const counts = (first?.meta.counts ?? {}) as Counts
  const total = typeof first?.meta.total === 'number' ? first.meta.total : rows.length
  const narrowed = filter.kind !== null || filter.action !== null || filter.species !== null
  return (
    <div>
      {first ? <CountsLine counts={counts} choose={(kind, action) => void setFilter({ kind, action })} /> : null}
      <form key={filter.species ?? ''} className="no-print mb-4 flex flex-wrap items-end gap-x-4 gap-y-3" aria-label="Narrow the comparison" onSubmit={(event) => {
        event.preventDefault()
        const text = String(new FormData(event.currentTarget).get('species') ?? '').trim().replace(/\s+/, '-')
        void setFilter({ species: text === '' ? null : text })
      }}>
        <label className="block"><span className="label">Kind</span>
          <select className="input" value={filter.kind ?? ''} onChange={(event) => void setFilter({ kind: KINDS.find((kind) => kind === event.target.value) ?? null })}>
            <option value="">all kinds</option>{KINDS.map((kind) => <option key={kind} value={kind}>{KIND_WORDS[kind]}</option>)}
          </select>
        </label>
        <label className="block"><span className="label">What happened</span>
          <select className="input" value={filter.action ?? ''} onChange={(event) => void setFilter({ action: ACTIONS.find((action) => action === event.target.value) ?? null })}>
            <option value="">anything</option>{ACTIONS.map((action) => <option key={action} value={action}>{ACTION_WORDS[action]}</option>)}
          </select>
        </label>
        <label className="block"><span className="label">Species</span><input name="species" className="input w-32" autoComplete="off" spellCheck={false} defaultValue={filter.species ?? ''} placeholder="all; or Na I" /></label>
        <button type="submit" className="btn">Narrow</button>
        {narrowed ? <button type="button" className="btn btn-quiet" onClick={() => void setFilter({ kind: null, action: null, species: null })}>Show all</button> : null}
      </form>
      {error ? <ProblemView error={error} onRetry={() => void refetch()} heading="h3" /> : isPending ? <TableSkeleton label="Comparing the editions" /> : rows.length === 0 ? (
        <p className="note">{narrowed ? 'Nothing that differs is of this kind.' : `Nothing differs between edition ${from} and edition ${to}.`}</p>
      ) : (
        <DataTable columns={columnsFor(from, to)} rows={rows} rowKey={(row) => `${row.kind} ${row.subject}`} caption={`What edition ${to} shows otherwise than edition ${from}`} hideCaption
          summary={rows.length < total ? `The first ${count(rows.length)} of ${count(total)} differences` : plural(total, 'difference')}
          actions={<a className="btn btn-small" href={apiPath(`/editions/${to}/changes`, { ...query, format: 'csv', limit: 1000 })} download={`lodeterm-edition-${to}-since-${from}.csv`}>{total > 1000 ? 'First 1000 as CSV' : 'CSV file'}</a>} />
      )}
      <div className="no-print mt-4 flex flex-wrap items-center gap-x-5 gap-y-2">
        {hasNextPage ? <button type="button" className="btn" disabled={isFetchingNextPage} onClick={() => void fetchNextPage()}>{isFetchingNextPage ? 'Loading' : 'Show more'}</button> : null}
        {from < to ? (
          <span className="note">For refits: <a className="link" href={apiPath(`/editions/${to}/level-map`, { since: from, format: 'csv' })} download={`lodeterm-levels-${from}-to-${to}.csv`}>where each level of edition {from} stands in edition {to}</a>, as CSV.</span>
        ) : null}
      </div>
    </div>
  )
}

/** Chooses an edition by number; the empty table stands before the first. */
export function EditionChoice({ label, value, editions, empty = false, onChange }: { label: string; value: number; editions: readonly Edition[]; empty?: boolean; onChange: (n: number) => void }) {
  return (
    <label className="block min-w-0"><span className="label">{label}</span>
      <select className="input max-w-[min(100%,20rem)]" value={value} onChange={(event) => onChange(Number(event.target.value))}>
        {editions.map(({ number, label: name }) => <option key={number} value={number}>{`${number}: ${name}`}</option>)}
        {empty ? <option value={0}>0: the empty table</option> : null}
      </select>
    </label>
  )
}
