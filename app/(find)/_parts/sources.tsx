'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import type { Source } from '@/openapi/schemas/source'
import { DataTable, type Column } from '../../_components/data-table'
import { apiQuery } from '../../_components/data/api'
import { useEdition } from '../../_components/data/edition'
import { plural } from '../../_components/number'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { TableSkeleton } from '../../_components/skeleton'

export const usedTotal = (used: Source['used_by']): number => used.levels + used.measured_g + used.isotopes + used.hyperfine_constants + used.species

/** The bibliography of the edition. */
export function SourcesList() {
  const { param, href } = useEdition()
  const query = { edition: param, limit: 1000 }
  const { data, error, isPending, refetch } = useQuery(apiQuery<Source[]>('/sources', query))
  const columns: Column<Source>[] = [
    { name: 'citation', header: 'Source', rowHeader: true, wrap: true, value: (row) => row.citation, sort: true, cell: (row) => <Link className="link block min-h-6 min-w-[18rem] sm:w-[44rem] sm:max-w-[55vw]" href={href(`/sources/${encodeURIComponent(row.key)}`)}>{row.citation}</Link> },
    { name: 'key', header: 'Key', value: (row) => row.key, only: 'copy' },
    { name: 'doi', header: 'DOI', value: (row) => row.doi, only: 'copy' },
    { name: 'kind', header: 'Kind', value: (row) => row.kind, sort: true },
    { name: 'year', header: 'Year', align: 'right', value: (row) => row.year, sort: true, cell: (row) => row.year ?? '' },
    { name: 'values', header: 'Values that rest on it', align: 'right', value: (row) => usedTotal(row.used_by), sort: true },
  ]
  return (
    <div className="page">
      <PageHead title="Sources"><p>Where the values of this edition come from. Each value carries its own source, and how far it was checked against it.</p></PageHead>
      {isPending ? <TableSkeleton label="Loading the sources" columns={3} rows={10} /> : error ? <ProblemView error={error} onRetry={() => void refetch()} /> : (
        <DataTable columns={columns} rows={data.data} rowKey={(row) => row.key} caption="Sources" hideCaption summary={plural(data.data.length, 'source')} />
      )}
      <RequestPanel path="/sources" query={query} />
    </div>
  )
}
