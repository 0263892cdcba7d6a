'use client'
import { useQueries } from '@tanstack/react-query'
import { componentPlaces } from '@/lib/atomic/components'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'

export interface PickableComponent {
  twoMLower: number
  twoMUpper: number
  q: number
}

export interface ChosenLine {
  id: string
  detail: TransitionDetail | null
  error: unknown
  /** What a peak of it can be, by q and then m; empty until the line is known. */
  components: PickableComponent[]
}

const pickable = (detail: TransitionDetail): PickableComponent[] =>
  componentPlaces(detail.kind, Math.round(2 * detail.lower.term.j), Math.round(2 * detail.upper.term.j))
    .filter((place) => place.strength > 0)
    .map(({ twoMLower, twoMUpper, q }) => ({ twoMLower, twoMUpper, q }))
    .sort((a, b) => a.q - b.q || a.twoMLower - b.twoMLower)

/** The lines chosen, as the table has them. */
export function useLines(ids: readonly string[]): ChosenLine[] {
  const { param: edition } = useEdition()
  return useQueries({
    queries: ids.map((id) => apiQuery<TransitionDetail>(`/transitions/${id}`, { edition })),
    combine: (answers) =>
      answers.map(({ data, error }, i): ChosenLine => ({ id: ids[i] ?? '', detail: data?.data ?? null, error, components: data ? pickable(data.data) : [] })),
  })
}
