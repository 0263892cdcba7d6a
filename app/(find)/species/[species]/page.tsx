import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../../../_components/data/prefetch'
import { editionParam, segment, type PageQuery } from '../../../_components/data/search-params'
import { speciesText } from '../../../_components/names'
import { SpeciesView } from '../../_parts/species-view'
import { speciesLevels } from '../../_parts/species-query'

type Props = { params: Promise<{ species: string }>; searchParams: Promise<PageQuery> }

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: speciesText(segment((await params).species)) }
}

export default async function SpeciesPage({ params, searchParams }: Props) {
  const species = segment((await params).species)
  const edition = editionParam(await searchParams)
  const state = await prefetch([[`/species/${encodeURIComponent(species)}`, { edition }], { path: '/levels', query: speciesLevels(species, edition), pages: true }, ['/follows', { subject: species }]], { subject: true })
  return (
    <HydrationBoundary state={state}>
      <SpeciesView species={species} />
    </HydrationBoundary>
  )
}
