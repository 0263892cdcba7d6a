'use client'
import { useQuery } from '@tanstack/react-query'
import { parseAsStringLiteral, useQueryState } from 'nuqs'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { ProblemView } from '@/app/_components/problem-view'
import { Warnings } from '@/app/_components/warnings'
import { BenchSkeleton } from '../_parts/bench-skeleton'
import { ForbiddenLine } from './forbidden-line'
import { LineBench } from './line-bench'
import { LineFoot } from './line-foot'
import { LineHead } from './line-head'

const KINDS = ['E1', 'M1', 'E2'] as const

/** The page of one line, or of a pair that makes none. */
export function LineView({ id }: { id: string }) {
  const { param: edition } = useEdition()
  const [kind] = useQueryState('kind', parseAsStringLiteral(KINDS))
  const { data, error, refetch } = useQuery(apiQuery<TransitionDetail>(`/transitions/${id}`, { kind, edition }))
  if (error) {
    return (
      <div className="page py-10">
        <ProblemView error={error} onRetry={() => void refetch()} heading="h1" />
      </div>
    )
  }
  if (!data) return <BenchSkeleton />
  const line = data.data
  return (
    <div className="page pb-16">
      <LineHead line={line} />
      <Warnings meta={data.meta} />
      {line.verdict.allowed ? <LineBench line={line} /> : <ForbiddenLine line={line} />}
      <LineFoot line={line} kind={kind} />
    </div>
  )
}
