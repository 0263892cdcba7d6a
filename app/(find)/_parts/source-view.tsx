'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import type { Level } from '@/openapi/schemas/level'
import type { Source } from '@/openapi/schemas/source'
import { HowToCite } from '../../_components/citation'
import { DataTable } from '../../_components/data-table'
import { apiQuery } from '../../_components/data/api'
import { useEdition } from '../../_components/data/edition'
import { EvidenceKey } from '../../_components/evidence'
import { levelColumns } from '../../_components/level-columns'
import { plural } from '../../_components/number'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton, TableSkeleton } from '../../_components/skeleton'

const USES: readonly { name: keyof Source['used_by']; one: string; many?: string }[] = [
  { name: 'levels', one: 'level' }, { name: 'measured_g', one: 'measured Landé factor' }, { name: 'species', one: 'ionisation energy', many: 'ionisation energies' },
  { name: 'isotopes', one: 'isotope' }, { name: 'hyperfine_constants', one: 'set of hyperfine constants', many: 'sets of hyperfine constants' },
]

/** One source and the levels that rest on it. */
export function SourceView({ source: key }: { source: string }) {
  const { param, href } = useEdition()
  const path = `/sources/${encodeURIComponent(key)}`
  const { data, error, isPending, refetch } = useQuery(apiQuery<Source>(path, { edition: param }))
  const levels = useQuery({ ...apiQuery<Level[]>('/levels', { source: key, limit: 200, edition: param }), enabled: error === null })
  if (error) return <div className="page pt-9"><ProblemView error={error} onRetry={() => void refetch()} heading="h1" /></div>
  const source = data?.data
  const uses = source ? USES.filter((use) => source.used_by[use.name] > 0).map((use) => plural(source.used_by[use.name], use.one, use.many)) : []
  return (
    <div className="page">
      <PageHead title={<span className="text-[0.8em]">{source?.title ?? source?.citation ?? 'Source'}</span>} crumbs={<Link className="link" href={href('/sources')}>All sources</Link>} />
      {isPending || source === undefined ? <Skeleton label="Loading the source" className="h-28 max-w-3xl" /> : (
        <dl className="facts max-w-4xl">
          <dt>As it was given</dt><dd>{source.citation}</dd>
          {source.authors ? <><dt>Authors</dt><dd>{source.authors}</dd></> : null}
          {source.journal ? <><dt>In</dt><dd>{source.journal}{source.year ? ` (${source.year})` : ''}</dd></> : null}
          {source.doi ? <><dt>DOI</dt><dd><a className="link" href={`https://doi.org/${source.doi}`} rel="noreferrer">{source.doi}</a></dd></> : null}
          <dt>Kind</dt><dd>{source.kind}</dd>
          <dt>Key</dt><dd><code>{source.key}</code></dd>
          {source.note ? <><dt>Note</dt><dd>{source.note}</dd></> : null}
          <dt>Rests on it</dt><dd>{uses.length === 0 ? 'nothing in this edition' : uses.join(', ')}</dd>
        </dl>
      )}
      {source ? <Part title="How to cite"><HowToCite path={path} query={{ edition: param }} name={source.key} /></Part> : null}
      <Part title="Levels with a value from here">
        {levels.isPending ? <TableSkeleton label="Loading the levels" /> : levels.error ? <ProblemView error={levels.error} onRetry={() => void levels.refetch()} heading="h3" /> : levels.data.data.length === 0 ? (
          <p className="note">No level of this edition has a value from this source.</p>
        ) : (
          <>
            <DataTable columns={levelColumns(href)} rows={levels.data.data} rowKey={(level) => level.id} caption="Levels with a value from this source" hideCaption
              summary={levels.data.page?.next_cursor ? `The first ${levels.data.data.length}` : plural(levels.data.data.length, 'level')} />
            <div className="mt-5"><EvidenceKey /></div>
          </>
        )}
      </Part>
      <RequestPanel path={path} query={{ edition: param }} />
    </div>
  )
}
