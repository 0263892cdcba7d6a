'use client'
import { useQueries, type UseQueryResult } from '@tanstack/react-query'
import { useEffect } from 'react'
import type { Level } from '@/openapi/schemas/level'
import { apiGet } from '../../_components/data/api'
import { valuesOfLevel } from './level-values'
import type { NewRow, Sheet } from './sheet'

async function levelsOf(species: string, signal: AbortSignal): Promise<Level[]> {
  const levels: Level[] = []
  let cursor: string | null = null
  do {
    const answer: Awaited<ReturnType<typeof apiGet<Level[]>>> = await apiGet<Level[]>('/levels', { species, limit: 1000, cursor }, signal)
    levels.push(...answer.data)
    cursor = answer.page?.next_cursor ?? null
  } while (cursor !== null)
  return levels
}

const rowOf = (level: Level): NewRow => {
  const { values, complete } = valuesOfLevel(level)
  return { key: `level:${level.id}`, subject: { kind: 'level', species: level.species, level: level.id, source: null, massNumber: null }, base: values, complete }
}

/** Outside, so that the levels stay the same list as long as no answer changes. */
const together = (results: UseQueryResult<Level[]>[]) => ({
  levels: results.flatMap((result) => result.data ?? []),
  loading: results.some((result) => result.isPending),
  error: results.find((result) => result.error !== null)?.error ?? null,
  retry: () => results.forEach((result) => { if (result.error !== null) void result.refetch() }),
})

/** The levels of the newest edition of the species chosen, as rows beside those of the changes. */
export function useLevels(sheet: Sheet, species: readonly string[]): { loading: boolean; error: unknown; retry: () => void } {
  const answers = useQueries({
    queries: species.map((one) => ({ queryKey: ['levels-to-edit', one], queryFn: ({ signal }: { signal: AbortSignal }) => levelsOf(one, signal), staleTime: 5 * 60_000 })),
    combine: together,
  })
  const { levels } = answers
  const wanted = species.join(' ')
  useEffect(() => {
    const chosen = new Set(wanted.split(' '))
    sheet.together(() => {
      sheet.dropUntouched((row) => row.subject.kind !== 'level' || row.base === null || chosen.has(row.subject.species ?? ''))
      sheet.add(levels.map(rowOf))
    })
  }, [sheet, levels, wanted])
  return answers
}
