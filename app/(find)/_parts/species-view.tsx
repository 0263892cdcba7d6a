'use client'
import Link from 'next/link'
import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import type { Level } from '@/openapi/schemas/level'
import type { Isotope, Species } from '@/openapi/schemas/species'
import { Configuration } from '../../_components/configuration'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages, apiPath, apiQuery } from '../../_components/data/api'
import { useEdition } from '../../_components/data/edition'
import { EmptyState } from '../../_components/empty-state'
import { Follow } from '../../_components/follow'
import { EvidenceKey } from '../../_components/evidence'
import { levelColumns } from '../../_components/level-columns'
import { levelPage, speciesText } from '../../_components/names'
import { decimalsOf, fixed, halves, plural } from '../../_components/number'
import { PageHead, Part } from '../../_components/page-head'
import { TermDiagram } from '../../_components/plots/term-diagram'
import { ProblemView } from '../../_components/problem-view'
import { Quantity } from '../../_components/quantity'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton, TableSkeleton } from '../../_components/skeleton'
import { SourceRef } from '../../_components/source-ref'
import { speciesLevels } from './species-query'

const isotopeColumns = (element: string): Column<Isotope>[] => [
  { name: 'mass_number', header: 'Isotope', value: (row) => row.mass_number, rowHeader: true, cell: (row) => <span className="symbol"><sup>{row.mass_number}</sup>{element}</span> },
  { name: 'mass_u', header: 'Mass, u', align: 'right', value: (row) => row.mass_u, cell: (row) => <Quantity value={row.mass_u} digits={12} /> },
  { name: 'nuclear_spin', header: 'Spin I', align: 'right', value: (row) => row.nuclear_spin, cell: (row) => (row.nuclear_spin === null ? <Quantity value={null} /> : halves(row.nuclear_spin)) },
  { name: 'abundance_percent', header: 'Abundance, %', align: 'right', value: (row) => row.abundance_percent, sort: true, cell: (row) => <Quantity value={row.abundance_percent} digits={6} /> },
  { name: 'source', header: 'Source', value: (row) => row.source, wrap: true, cell: (row) => <SourceRef source={row.source} evidence={row.evidence} /> },
]

function Facts({ species }: { species: Species }) {
  return (
    <dl className="facts max-w-3xl">
      <dt>Element</dt>
      <dd>{species.name}, Z&#8239;=&#8239;{species.z}, charge {species.charge === 0 ? 'none' : `+${species.charge}`}</dd>
      <dt>Core left out of the configurations</dt>
      <dd>{species.core_configuration === '' ? 'none' : <Configuration text={species.core_configuration} />}</dd>
      <dt>Ionisation energy</dt>
      <dd className="flex flex-wrap items-baseline gap-x-4">
        <Quantity value={species.ionisation_energy_invcm} decimals={species.ionisation_energy_invcm === null ? 0 : decimalsOf(species.ionisation_energy_invcm)} unit="cm⁻¹" />
        {species.ionisation_energy_invcm === null ? null : <SourceRef source={species.ionisation_source} evidence={species.ionisation_evidence} />}
      </dd>
      {species.note ? (<><dt>Note</dt><dd>{species.note}</dd></>) : null}
    </dl>
  )
}

function Levels({ species, beside }: { species: Species; beside: React.ReactNode }) {
  const { param, href } = useEdition()
  const query = speciesLevels(species.id, param)
  const answer = useInfiniteQuery(apiPages<Level>('/levels', query))
  const levels = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  const columns = useMemo(() => levelColumns(href, { species: false, named: levels.some((level) => level.alternative_name !== null) }), [href, levels])
  if (answer.isPending) {
    return (
      <>
        <Part title="Term diagram"><Skeleton label="Drawing the term diagram" className="h-[30rem] w-full" /></Part>
        <Part title="Levels"><TableSkeleton rows={species.level_count || 8} /></Part>
      </>
    )
  }
  if (answer.error && levels.length === 0) return <><Part title="Levels"><ProblemView error={answer.error} onRetry={() => void answer.refetch()} heading="h3" /></Part>{beside}</>
  if (levels.length === 0) return <Part title="Levels"><EmptyState title="This edition holds no level of this species" /></Part>
  return (
    <>
      <Part title="Term diagram">
        <TermDiagram title={`Levels of ${speciesText(species.id)} by term`} levels={levels} ionisationInvcm={species.ionisation_energy_invcm} hrefFor={(level) => href(levelPage(level.id))} name={species.id} />
      </Part>
      <div className="gap-x-16 xl:grid xl:grid-cols-[auto_minmax(0,1fr)] [&>*]:min-w-0">
        <Part title="Levels" aside={plural(species.level_count, 'level')}>
          <DataTable columns={columns} rows={levels} rowKey={(level) => level.id} caption={`Levels of ${speciesText(species.id)}`} hideCaption
            actions={<a className="btn btn-small" download={`${species.id}-levels.csv`} href={apiPath('/levels', { ...query, limit: 1000, format: 'csv' })}>Download CSV</a>} />
          {answer.hasNextPage ? <button type="button" className="btn mt-4" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show more levels</button> : null}
        </Part>
        <div>{beside}</div>
      </div>
      <div className="mt-5"><EvidenceKey /></div>
    </>
  )
}

function Beside({ species }: { species: Species }) {
  const sum = species.isotope_abundance_sum_percent
  return (
    <>
      <Part title="Isotopes" aside={sum !== null && sum < 99.5 ? `Only the main isotopes are listed: ${fixed(sum, 1)} % in all` : undefined}>
        {species.isotopes.length === 0 ? <p className="note">None are listed.</p> : (
          <DataTable columns={isotopeColumns(species.element)} rows={species.isotopes} rowKey={(row) => String(row.mass_number)} caption={`Isotopes of ${species.name}`} hideCaption />
        )}
      </Part>
      <Part title="Sources">
        <ul className="space-y-1">{species.sources.map((key) => <li key={key}><SourceRef source={key} /></li>)}</ul>
      </Part>
    </>
  )
}

/** One species: its term diagram, levels, isotopes and sources. */
export function SpeciesView({ species: id }: { species: string }) {
  const { param, href } = useEdition()
  const path = `/species/${encodeURIComponent(id)}`
  const { data, error, isPending, refetch } = useQuery(apiQuery<Species>(path, { edition: param }))
  if (error) return <div className="page pt-9"><ProblemView error={error} onRetry={() => void refetch()} heading="h1" /></div>
  const species = data?.data
  return (
    <div className="page">
      <PageHead title={<>{speciesText(id)}{species ? <span className="text-muted">, {species.name}</span> : null}</>} crumbs={<Link className="link" href={href('/')}>All species</Link>}
        aside={<div className="flex flex-wrap gap-3"><Follow subject={id} /><Link className="btn" href={href(`/lines?species=${encodeURIComponent(id)}`)}>Lines of {speciesText(id)}</Link></div>} />
      {isPending || species === undefined ? <Skeleton label="Loading the species" className="h-28 max-w-3xl" /> : (
        <>
          <Facts species={species} />
          <Levels species={species} beside={<Beside species={species} />} />
        </>
      )}
      <RequestPanel path="/levels" query={speciesLevels(id, param)} />
    </div>
  )
}
