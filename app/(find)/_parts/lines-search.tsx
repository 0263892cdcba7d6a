'use client'
import Link from 'next/link'
import { useRouter, useSearchParams } from 'next/navigation'
import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import type { Species } from '@/openapi/schemas/species'
import type { Transition } from '@/openapi/schemas/transition'
import { Chip } from '../../_components/chip'
import { DataTable } from '../../_components/data-table'
import { apiPages, apiPath, apiQuery, queryString, type ApiQuery } from '../../_components/data/api'
import { useEdition } from '../../_components/data/edition'
import type { PageQuery } from '../../_components/data/search-params'
import { EmptyState } from '../../_components/empty-state'
import { Excluded } from '../../_components/excluded'
import { lineColumns } from '../../_components/line-columns'
import { speciesText } from '../../_components/names'
import { plural } from '../../_components/number'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { TableSkeleton } from '../../_components/skeleton'
import { Warnings } from '../../_components/warnings'
import { LINES_MOST, patternsPage } from '../../(bench)/_patterns/line-ids'
import { lineQuery, SCALES, scaleOf } from './line-query'
import { LinesForm, type LinesFields } from './lines-form'

const WORKED: readonly { text: string; query: ApiQuery }[] = [
  { text: 'the sodium D lines', query: { wavelength_min_nm: '588.5', wavelength_max_nm: '590' } },
  { text: 'the Mg b lines', query: { wavelength_min_nm: '516.5', wavelength_max_nm: '518.5', species: ['Mg-I'] } },
  { text: 'around 1083 nm', query: { wavelength_min_nm: '1082', wavelength_max_nm: '1084' } },
  { text: 'Fe I with effective g of 2.5 or more', query: { species: ['Fe-I'], g_eff_min: '2.5' } },
  { text: 'magnetic dipole lines below 1000 cm⁻¹', query: { kind: 'M1', wavenumber_max_invcm: '1000' } },
]

/** The address of this page for a query; what is the default is left out. */
const pageFor = (query: ApiQuery): string =>
  `/lines${queryString({ ...query, limit: undefined, kind: query.kind === 'E1' ? undefined : query.kind, rules: query.rules === 'rigorous' ? undefined : query.rules, medium: query.medium === 'conventional' ? undefined : query.medium })}`

const text = (value: ApiQuery[string]): string => (typeof value === 'string' ? value : '')

/** `Fe I`, `fe-i`, `Fe I, Na I` -> identifiers; what is not one is passed on, so that the API names what is wrong with it. */
const speciesIds = (typed: string): string[] =>
  typed.split(/[,;]/).map((part) => part.trim()).filter((part) => part !== '').map((part) => {
    const match = /^([a-z]{1,2})[\s\u00a0-]*([ivx]+)$/i.exec(part)
    return match?.[1] && match[2] ? `${match[1].charAt(0).toUpperCase()}${match[1].slice(1).toLowerCase()}-${match[2].toUpperCase()}` : part
  })

function fieldsOf(query: ReturnType<typeof lineQuery>): LinesFields {
  const scale = scaleOf(query)
  return {
    scale, min: text(query[SCALES[scale].min]), max: text(query[SCALES[scale].max]), species: query.species.map((id) => id.replace('-', ' ')).join(', '),
    kind: text(query.kind) || 'E1', rules: text(query.rules), gMin: text(query.g_eff_min), gMax: text(query.g_eff_max),
  }
}

function queryOf(fields: LinesFields, edition: ApiQuery[string]): ApiQuery {
  const { min, max } = SCALES[fields.scale]
  const medium = fields.scale === 'air' || fields.scale === 'vacuum' ? fields.scale : undefined
  return { [min]: fields.min.trim(), [max]: fields.max.trim(), medium, species: speciesIds(fields.species), kind: fields.kind, rules: fields.rules, g_eff_min: fields.gMin.trim(), g_eff_max: fields.gMax.trim(), edition }
}

function Filters({ query }: { query: ReturnType<typeof lineQuery> }) {
  const scale = scaleOf(query)
  const { label, unit, min, max } = SCALES[scale]
  const without = (change: ApiQuery) => pageFor({ ...query, ...change })
  const parts: { what: string; shown: string; href: string }[] = []
  if (query[min] ?? query[max]) {
    const shown = query[min] === undefined ? `up to ${text(query[max])}` : query[max] === undefined ? `from ${text(query[min])}` : `${text(query[min])} to ${text(query[max])}`
    parts.push({ what: label.toLowerCase(), shown: `${shown}\u202f${unit}`, href: without({ [min]: undefined, [max]: undefined, medium: undefined }) })
  }
  for (const id of query.species) parts.push({ what: 'species', shown: speciesText(id), href: without({ species: query.species.filter((other) => other !== id) }) })
  if (query.kind !== undefined && query.kind !== 'E1') parts.push({ what: 'kind', shown: text(query.kind), href: without({ kind: undefined }) })
  if (query.rules === 'ls') parts.push({ what: 'rules', shown: 'LS rules too', href: without({ rules: undefined }) })
  if (query.g_eff_min !== undefined) parts.push({ what: 'effective g', shown: `from ${text(query.g_eff_min)}`, href: without({ g_eff_min: undefined }) })
  if (query.g_eff_max !== undefined) parts.push({ what: 'effective g', shown: `up to ${text(query.g_eff_max)}`, href: without({ g_eff_max: undefined }) })
  if (parts.length === 0) return null
  return (
    <div className="flex flex-wrap items-center gap-2">
      {parts.map((part) => (
        <Chip key={`${part.what} ${part.shown}`} kind={part.what} href={part.href} removeLabel={`Take away ${part.what} ${part.shown}`}>{part.shown}</Chip>
      ))}
    </div>
  )
}

function Results({ query }: { query: ReturnType<typeof lineQuery> }) {
  const { href } = useEdition()
  const answer = useInfiniteQuery(apiPages<Transition>('/transitions', query))
  const rows = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  const scale = scaleOf(query)
  const columns = useMemo(() => lineColumns(href, { shown: scale, sortable: !answer.hasNextPage, full: true }), [href, scale, answer.hasNextPage])
  if (answer.isPending) return <TableSkeleton label="Searching lines" rows={10} columns={7} />
  if (answer.error && rows.length === 0) return <ProblemView error={answer.error} onRetry={() => void answer.refetch()} />
  const meta = answer.data?.pages[0]?.meta
  const excluded = <Excluded counts={meta?.excluded} />
  if (rows.length === 0) {
    return (
      <>
        <EmptyState title="No line of this edition lies in there">
          <p>Widen the window, let a species or a range of g go, or allow intercombination lines. What was left out stands below.</p>
        </EmptyState>
        <div className="mt-3">{excluded}</div>
      </>
    )
  }
  return (
    <>
      <DataTable columns={columns} rows={rows} rowKey={(line) => line.id} caption="Lines, by wavenumber" hideCaption
        summary={<span role="status">{answer.hasNextPage ? `The first ${plural(rows.length, 'line')}, by wavenumber` : plural(rows.length, 'line')}</span>}
        actions={<><Link className="btn btn-small" href={href(patternsPage(rows.filter((line) => line.kind !== 'E2').map((line) => line.id)))}>See {rows.length > LINES_MOST ? `the first ${LINES_MOST}` : 'these'} in Patterns</Link><a className="btn btn-small" href={apiPath('/transitions', { ...query, limit: 1000, format: 'csv' })} download="lines.csv">Download CSV</a></>} />
      <div className="mt-4 flex flex-wrap items-start justify-between gap-4">
        <div>
          {excluded}
          <Warnings meta={meta} quiet />
        </div>
        {answer.hasNextPage ? (
          <button type="button" className="btn" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>
            {answer.isFetchingNextPage ? 'Loading more' : 'Show 100 more'}
          </button>
        ) : null}
      </div>
      {answer.error ? <div className="mt-4"><ProblemView error={answer.error} onRetry={() => void answer.fetchNextPage()} heading="h3" /></div> : null}
    </>
  )
}

/** Window search over every species of the edition. */
export function LinesSearch() {
  const router = useRouter()
  const search = useSearchParams()
  const { param } = useEdition()
  const query = useMemo(() => {
    const page: PageQuery = {}
    for (const name of new Set(search.keys())) page[name] = search.getAll(name)
    return lineQuery(page)
  }, [search])
  const { data: species } = useQuery(apiQuery<Species[]>('/species', { edition: param, limit: 1000 }))
  const go = (fields: LinesFields) => router.push(pageFor(queryOf(fields, query.edition)), { scroll: false })
  return (
    <div className="page">
      <PageHead title="Lines">
        <p>Every line of the edition in a window, of all species at once. Worked windows:{' '}
          {WORKED.map((worked, index) => (
            <span key={worked.text}>{index > 0 ? ', ' : ''}<Link href={pageFor({ ...worked.query, edition: query.edition })} scroll={false}>{worked.text}</Link></span>
          ))}.
        </p>
      </PageHead>
      <LinesForm key={search.toString()} initial={fieldsOf(query)} species={species?.data.map((one) => one.id) ?? []} onSubmit={go} />
      <div className="mt-5 space-y-4">
        <Filters query={query} />
        <Results query={query} />
      </div>
      <RequestPanel path="/transitions" query={query} />
    </div>
  )
}
