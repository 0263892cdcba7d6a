'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import { Download } from 'lucide-react'
import Link from 'next/link'
import { useState } from 'react'
import type { Import, ImportRow, ImportVerdict } from '@/openapi/schemas/import'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages, apiPath } from '../../_components/data/api'
import { levelPage } from '../../_components/names'
import { count } from '../../_components/number'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { FindingsList } from '../_parts/marks'
import { ValueText } from '../_parts/values-text'
import { fieldWords } from '../_sheet/columns'

const VERDICTS: readonly { id: ImportVerdict; word: string; tells: string }[] = [
  { id: 'error', word: 'Errors', tells: 'cannot be imported' }, { id: 'ambiguous', word: 'Ambiguous', tells: 'could be several levels' }, { id: 'new', word: 'New', tells: 'levels to be made' },
  { id: 'changed', word: 'Changed', tells: 'levels of the table' }, { id: 'same', word: 'Same', tells: 'nothing differs' },
]
const WORD: Record<ImportVerdict, string> = { error: 'error', ambiguous: 'ambiguous', new: 'new', changed: 'changed', same: 'same' }
const TINT: Record<ImportVerdict, string> = { error: 'text-bad', ambiguous: 'text-warn', new: 'text-good', changed: 'text-ink', same: 'text-muted' }

const COLUMNS: Column<ImportRow>[] = [
  { name: 'row', header: 'Line', align: 'right', rowHeader: true, value: (row) => row.row },
  { name: 'verdict', header: 'Verdict', value: (row) => row.verdict, cell: (row) => <span className={`font-medium ${TINT[row.verdict]}`}>{WORD[row.verdict]}</span> },
  { name: 'level', header: 'Level', value: (row) => row.level, cell: (row) => (row.level === null ? '' : row.verdict === 'new' ? <code className="text-xs">{row.level}</code> : <Link className="link font-mono text-xs" href={levelPage(row.level)} prefetch={false}>{row.level}</Link>) },
  {
    name: 'fields', header: 'Values, before and after', wrap: true, value: (row) => row.fields.map(({ field, before, after }) => `${field}: ${JSON.stringify(before)} -> ${JSON.stringify(after)}`).join('; '),
    cell: (row) => (
      <ul>
        {row.fields.slice(0, row.verdict === 'new' ? 4 : 12).map(({ field, before, after }) => (
          <li key={field}><span className="text-muted">{fieldWords(field)}: </span>{row.verdict === 'new' ? null : <><ValueText field={field} value={before} /> <span className="text-muted">→</span> </>}<ValueText field={field} value={after} /></li>
        ))}
        {row.verdict === 'new' && row.fields.length > 4 ? <li className="note">and {row.fields.length - 4} more values</li> : null}
      </ul>
    ),
  },
  { name: 'findings', header: 'Findings', wrap: true, value: (row) => row.findings.map((finding) => `${finding.severity}: ${finding.detail}`).join(' '), cell: (row) => <FindingsList findings={row.findings} name={(finding) => (finding.field === null ? null : fieldWords(finding.field))} /> },
]

/** What the import says of each row of the file. */
export function ImportReport({ shown }: { shown: Import }) {
  const first = VERDICTS.find(({ id }) => shown.counts[id] > 0)?.id ?? 'same'
  const [verdict, setVerdict] = useState<ImportVerdict | 'all'>(shown.counts.error + shown.counts.ambiguous > 0 ? first : 'all')
  const path = `/amendments/${shown.amendment}/imports/${shown.id}/rows`
  const { data, error, isPending, refetch, hasNextPage, fetchNextPage, isFetchingNextPage } = useInfiniteQuery({ ...apiPages<ImportRow>(path, { limit: 100, ...(verdict === 'all' ? {} : { verdict }) }), staleTime: 60_000 })
  const total = Object.values(shown.counts).reduce((sum, n) => sum + n, 0)
  const rows = data?.pages.flatMap((page) => page.data) ?? []
  if (total === 0) return null
  return (
    <div className="space-y-3">
      <div role="group" aria-label="Rows by verdict" className="flex flex-wrap gap-2">
        <button type="button" aria-pressed={verdict === 'all'} onClick={() => setVerdict('all')} className="btn btn-small aria-pressed:border-lamp aria-pressed:bg-lamp-wash">All <span className="num text-muted">{count(total)}</span></button>
        {VERDICTS.map(({ id, word, tells }) => (
          <button key={id} type="button" aria-pressed={verdict === id} disabled={shown.counts[id] === 0} onClick={() => setVerdict(id)} title={tells} className="btn btn-small aria-pressed:border-lamp aria-pressed:bg-lamp-wash">
            <span className={shown.counts[id] > 0 ? TINT[id] : ''}>{word}</span> <span className="num text-muted">{count(shown.counts[id])}</span>
          </button>
        ))}
      </div>
      {isPending ? <TableSkeleton rows={6} columns={4} label="Loading the rows" /> : error ? <ProblemView error={error} onRetry={() => void refetch()} heading="h3" /> : (
        <>
          <DataTable columns={COLUMNS} rows={rows} rowKey={(row) => String(row.row)} caption="Rows of the file" hideCaption
            actions={<a className="btn btn-small" href={apiPath(path, { format: 'csv' })} download={`${shown.file_name.replace(/\.[^.]*$/, '')}-report.csv`}><Download size={13} aria-hidden="true" />Whole report as CSV</a>} />
          {hasNextPage ? <button type="button" className="btn" disabled={isFetchingNextPage} onClick={() => void fetchNextPage()}>Show more rows</button> : null}
        </>
      )}
    </div>
  )
}
