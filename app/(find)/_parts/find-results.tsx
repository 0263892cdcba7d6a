'use client'
import Link from 'next/link'
import { keepPreviousData, useQuery } from '@tanstack/react-query'
import type { Find } from '@/openapi/schemas/find'
import { Chip } from '../../_components/chip'
import { DataTable } from '../../_components/data-table'
import { apiQuery } from '../../_components/data/api'
import { useEdition } from '../../_components/data/edition'
import { EmptyState } from '../../_components/empty-state'
import { EvidenceKey } from '../../_components/evidence'
import { levelColumns } from '../../_components/level-columns'
import { lineColumns } from '../../_components/line-columns'
import { Part } from '../../_components/page-head'
import { plural } from '../../_components/number'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { SearchBox } from '../../_components/shell/search-box'
import { TableSkeleton } from '../../_components/skeleton'
import { Warnings } from '../../_components/warnings'

const KIND_WORD: Record<Find['understood'][number]['kind'], string> = {
  species: 'species', term: 'term', configuration: 'configuration', j: 'J', parity: 'parity', wavelength: 'wavelength', energy: 'energy', g: 'g',
  line_name: 'line', level_name: 'level', level_id: 'level', text: 'not understood',
}

function Understood({ find, href }: { find: Find; href: (path: string) => string }) {
  if (find.understood.length === 0) return null
  return (
    <div className="mt-4 flex flex-wrap items-center gap-2">
      <span className="note mr-1">Understood as</span>
      {find.understood.map((part) => (
        <Chip key={`${part.kind} ${part.text}`} kind={part.meaning.startsWith(KIND_WORD[part.kind]) ? undefined : KIND_WORD[part.kind]} href={href(part.without === '' ? '/' : `/?q=${encodeURIComponent(part.without)}`)} removeLabel={`Take away ${part.text}`}>
          {part.meaning}
        </Chip>
      ))}
    </div>
  )
}

function Questions({ find, href }: { find: Find; href: (path: string) => string }) {
  return find.questions.map((question) => (
    <section key={question.text} aria-label="A question back" className="mt-6 border-l-[3px] border-lamp bg-sheet px-5 py-4">
      <p className="font-text text-xl">{question.text}</p>
      <ul className="mt-3 flex flex-wrap gap-2">
        {question.options.map((option) => (
          <li key={option.q}>
            <Link className="btn" href={href(`/?q=${encodeURIComponent(option.q)}`)}>{option.label}</Link>
          </li>
        ))}
      </ul>
    </section>
  ))
}

function Nothing({ href }: { href: (path: string) => string }) {
  const example = (q: string) => <Link href={href(`/?q=${encodeURIComponent(q)}`)}>{q}</Link>
  return (
    <EmptyState title="Nothing in this edition answers to all of that">
      <p>Take one of the understood parts away, or widen it:</p>
      <ul>
        <li>an ion alone lists everything it has: {example('Fe I')}</li>
        <li>a wavelength with its unit finds lines near it: {example('630.2 nm')}</li>
        <li>a term without its J finds all of its levels: {example('3P*')}</li>
      </ul>
    </EmptyState>
  )
}

function Answer({ find }: { find: Find }) {
  const { href } = useEdition()
  const species = find.understood.filter((part) => part.kind === 'species')
  const linesFirst = find.understood.some((part) => part.kind === 'wavelength' || part.kind === 'line_name')
  if (find.levels.length === 0 && find.lines.length === 0) return find.questions.length > 0 ? null : <Nothing href={href} />
  const levels = find.levels.length === 0 ? null : (
    <Part key="levels" title="Levels" aside={find.levels_total > find.levels.length ? `The first ${find.levels.length} of ${find.levels_total}; add a part to narrow them` : plural(find.levels_total, 'level')}>
      <DataTable columns={levelColumns(href, { id: false, named: find.levels.some((level) => level.alternative_name !== null) })} rows={find.levels} rowKey={(level) => level.id} caption="Levels found" hideCaption />
    </Part>
  )
  const total = `${find.lines_total_is_lower_bound ? 'at least ' : ''}${find.lines_total}`
  const lines = find.lines.length === 0 ? null : (
    <Part key="lines" title="Lines" aside={find.lines_total > find.lines.length ? (
      <>The first {find.lines.length} of {total}. <Link className="link" href={href(species[0] ? `/lines?species=${encodeURIComponent(find.lines[0]?.lower.species ?? '')}` : '/lines')}>Search all lines by window</Link></>
    ) : plural(find.lines_total, 'line')}>
      <DataTable columns={lineColumns(href)} rows={find.lines} rowKey={(line) => line.id} caption="Lines found" hideCaption />
    </Part>
  )
  return (
    <>
      <div className={levels && lines ? 'grid gap-x-14 xl:grid-cols-2 [&>*]:min-w-0' : ''}>{linesFirst ? [lines, levels] : [levels, lines]}</div>
      {levels ? <div className="mt-6"><EvidenceKey /></div> : null}
    </>
  )
}

/** Find with something asked: how it was understood, then levels and lines together. */
export function FindResults({ q }: { q: string }) {
  const { param, href } = useEdition()
  const query = { q, edition: param }
  const { data, error, isPending, refetch } = useQuery({ ...apiQuery<Find>('/find', query), placeholderData: keepPreviousData })
  return (
    <div className="page pt-7">
      <h1 className="sr-only">Find: {q}</h1>
      <div className="max-w-3xl">
        <SearchBox key={q} initial={q} large />
      </div>
      {isPending ? (
        <div className="mt-8"><TableSkeleton label="Looking for levels and lines" rows={8} columns={6} /></div>
      ) : error ? (
        <div className="mt-8"><ProblemView error={error} onRetry={() => void refetch()} /></div>
      ) : (
        <>
          <Understood find={data.data} href={href} />
          <Questions find={data.data} href={href} />
          <div aria-live="polite" className="sr-only">{`${plural(data.data.levels_total, 'level')}, ${plural(data.data.lines_total, 'line')}`}</div>
          <Answer find={data.data} />
          <Warnings meta={data.meta} quiet />
        </>
      )}
      <RequestPanel path="/find" query={query} />
    </div>
  )
}
