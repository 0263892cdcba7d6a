'use client'
import { useQueries, type UseQueryResult } from '@tanstack/react-query'
import { useMemo } from 'react'
import type { WeighedLine } from '@/lib/prediction/profiles'
import { massOf } from '@/lib/prediction/profiles-mass'
import type { Species } from '@/openapi/schemas/species'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { apiQuery, type ApiAnswer } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { nm } from '@/app/_components/line-columns'
import { speciesText } from '@/app/_components/names'
import type { LineWanted } from './state'

export interface PatternLine {
  /** Place among the lines wanted, from 0: its number and its mark. */
  index: number
  id: string
  weight: number
  /** Null while it is on its way, and where it cannot be had. */
  detail: TransitionDetail | null
  error: Error | null
  name: string
}

export const lineName = (line: Pick<TransitionDetail, 'lower' | 'wavelength_conventional_nm'>): string => `${speciesText(line.lower.species)}\u00a0${nm(line.wavelength_conventional_nm)}`

/** What several queries hold; the same object as before where nothing in it has changed, since it is made outside of any render. */
const together = <T>(answers: UseQueryResult<ApiAnswer<T>>[]) => ({
  data: answers.map((answer) => answer.data?.data ?? null),
  errors: answers.map((answer) => answer.error),
  pending: answers.some((answer) => answer.isPending),
})
const details = (answers: UseQueryResult<ApiAnswer<TransitionDetail>>[]) => together(answers)
const speciesTogether = (answers: UseQueryResult<ApiAnswer<Species>>[]) => together(answers)

/** The lines of the picture with what the table knows of them. */
export function useLines(wanted: readonly LineWanted[]): PatternLine[] {
  const { param: edition } = useEdition()
  const { data, errors } = useQueries({ queries: wanted.map(({ id }) => apiQuery<TransitionDetail>(`/transitions/${id}`, { edition })), combine: details })
  return useMemo(
    () =>
      wanted.map(({ id, weight }, index) => {
        const detail = data[index] ?? null
        return { index, id, weight, detail, error: detail === null ? (errors[index] ?? null) : null, name: detail === null ? id : lineName(detail) }
      }),
    [wanted, data, errors],
  )
}

export type WeighedPatternLine = WeighedLine & { index: number }

/** The lines with their masses, which are read only where a temperature wants them. */
export function useWeighed(lines: readonly PatternLine[], temperatureK: number): { weighed: WeighedPatternLine[]; massesPending: boolean } {
  const { param: edition } = useEdition()
  const wanted = useMemo(() => [...new Set(temperatureK > 0 ? lines.flatMap(({ detail }) => (detail === null ? [] : [detail.lower.species])) : [])], [lines, temperatureK])
  const { data: species, pending } = useQueries({ queries: wanted.map((id) => apiQuery<Species>(`/species/${id}`, { edition })), combine: speciesTogether })
  const weighed = useMemo(
    () =>
      lines.flatMap(({ index, weight, detail }): WeighedPatternLine[] => {
        if (detail === null) return []
        const found = species.find((one) => one?.id === detail.lower.species) ?? null
        return [{ index, line: detail, weight, massU: massOf(found, { line: null, all: null, isotope: null }).u }]
      }),
    [lines, species],
  )
  return { weighed, massesPending: pending }
}
