'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import type { Species } from '@/openapi/schemas/species'
import { apiQuery } from '../../_components/data/api'
import { useEdition } from '../../_components/data/edition'
import { speciesPage, speciesText } from '../../_components/names'
import { Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { SearchBox } from '../../_components/shell/search-box'
import { Skeleton } from '../../_components/skeleton'

const EXAMPLES: readonly { q: string; shown?: React.ReactNode; what: string }[] = [
  { q: 'Na I', what: 'an ion' },
  { q: '589 nm', what: 'a wavelength' },
  { q: 'D1', what: 'a line’s name' },
  { q: '2P* 3/2', what: 'a term and J' },
  { q: 'H-alpha', what: 'a line’s name' },
  { q: 'Mg b', what: 'a group of lines' },
  { q: 'g>2', what: 'a range of g' },
  { q: 'Ne 1s5', what: 'a Paschen name' },
]

function SpeciesIndex() {
  const { param, href } = useEdition()
  const { data, error, isPending, refetch } = useQuery(apiQuery<Species[]>('/species', { edition: param, limit: 1000 }))
  if (isPending) return <Skeleton label="Loading the species" className="h-40 w-full" />
  if (error) return <ProblemView error={error} onRetry={() => void refetch()} heading="h3" />
  return (
    <ul className="columns-[9.5rem] gap-x-8 lg:columns-[10.5rem]">
      {data.data.map((species) => (
        <li key={species.id} className="break-inside-avoid">
          <Link href={href(speciesPage(species.id))} className="group flex min-h-8 items-baseline justify-between gap-3 border-b border-rule py-1 hover:border-lamp hover:bg-lamp-wash">
            <span className="font-text text-lg leading-tight group-hover:text-lamp-ink">{speciesText(species.id)}</span>
            <span className="num text-xs text-muted">{species.level_count} levels</span>
          </Link>
        </li>
      ))}
    </ul>
  )
}

/** Find before anything was asked: the box, worked examples, the plate, and every species there is. */
export function FindStart({ plate }: { plate: React.ReactNode }) {
  const { href, param } = useEdition()
  return (
    <>
      <div className="page pt-10 sm:pt-16">
        <h1 className="max-w-[24ch] text-[clamp(2rem,1.3rem+3vw,3.375rem)] leading-[1.08]">Find a level or a line, and see what a field does to it.</h1>
        <div className="mt-7 max-w-3xl sm:mt-9">
          <SearchBox large />
          <ul aria-label="Worked examples" className="mt-3 flex flex-wrap gap-x-1 gap-y-0.5">
            {EXAMPLES.map(({ q, what }) => (
              <li key={q}>
                <Link href={href(`/?q=${encodeURIComponent(q)}`)} title={what} className="inline-flex min-h-8 items-center rounded-sm px-2 font-text text-lg text-lamp-ink underline decoration-lamp/50 decoration-1 underline-offset-4 hover:bg-lamp-wash hover:text-ink">
                  {q}
                </Link>
              </li>
            ))}
          </ul>
        </div>
      </div>
      <div className="page">{plate}</div>
      <div className="page">
        <Part title="Species in this edition">
          <SpeciesIndex />
        </Part>
        <RequestPanel path="/species" query={{ edition: param, limit: 1000 }} />
      </div>
    </>
  )
}
