'use client'
import { useQuery } from '@tanstack/react-query'
import type { LevelDetail } from '@/openapi/schemas/level'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { ProblemView } from '@/app/_components/problem-view'
import { Warnings } from '@/app/_components/warnings'
import { BenchSkeleton } from '../_parts/bench-skeleton'
import { GPart } from './g-part'
import { HistoryPart } from './history-part'
import { LevelBench } from './level-bench'
import { LevelFoot } from './level-foot'
import { LevelHead } from './level-head'
import { TransitionsPart } from './transitions-part'

/** The page of one level. */
export function LevelView({ id }: { id: string }) {
  const { param: edition } = useEdition()
  const { data, error, refetch } = useQuery(apiQuery<LevelDetail>(`/levels/${id}`, { edition }))
  if (error) {
    return (
      <div className="page py-10">
        <ProblemView error={error} onRetry={() => void refetch()} heading="h1" />
      </div>
    )
  }
  if (!data) return <BenchSkeleton />
  const level = data.data
  return (
    <div className="page pb-16">
      <LevelHead level={level} />
      <Warnings meta={data.meta} />
      <GPart level={level} />
      <LevelBench level={level} />
      <TransitionsPart level={level} />
      <HistoryPart level={level} />
      <LevelFoot level={level} />
    </div>
  )
}
