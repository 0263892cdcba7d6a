'use client'
import { useQuery } from '@tanstack/react-query'
import type { GFactor, LevelDetail } from '@/openapi/schemas/level'
import { trueMinus } from '@/lib/units/print'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { Evidence } from '@/app/_components/evidence'
import { Notice } from '@/app/_components/notice'
import { fixed, significant } from '@/app/_components/number'
import { Part } from '@/app/_components/page-head'
import { ProblemView } from '@/app/_components/problem-view'
import { Quantity } from '@/app/_components/quantity'
import { TableSkeleton } from '@/app/_components/skeleton'
import { SourceRef } from '@/app/_components/source-ref'
import { Warnings } from '@/app/_components/warnings'
import { Formula } from './formula'

const SCHEME = { LS: 'LS', J1K: 'pair', jj: 'jj' } as const

/** g_J: derived step by step, then set beside what was measured. */
export function GPart({ level }: { level: LevelDetail }) {
  const { param: edition } = useEdition()
  const { data, error, refetch } = useQuery(apiQuery<GFactor>(`/levels/${level.id}/g-factor`, { edition }))
  const title = <>The Landé factor g<sub>J</sub></>
  if (error) return <Part title={title}><ProblemView error={error} onRetry={() => void refetch()} heading="h3" /></Part>
  if (!data) return <Part title={title}><TableSkeleton rows={4} columns={2} label="Loading the Landé factor" /></Part>
  const g = data.data
  if (g.status === 'not_applicable') {
    return (
      <Part title={title}>
        <Notice title="J = 0 has no Landé factor.">
          <p>There is one state, m = 0, and in first order a field leaves it where it is.</p>
        </Notice>
      </Part>
    )
  }
  return (
    <Part title={title} aside={<>g<sub>s</sub> = {g.g_s}</>}>
      <Warnings meta={data.meta} />
      <div className="grid gap-x-10 gap-y-6 lg:grid-cols-2">
        <Derivation g={g} />
        <Comparison g={g} />
      </div>
    </Part>
  )
}

function Derivation({ g }: { g: GFactor }) {
  return (
    <div>
      <h3 className="mb-2">{g.scheme ? `Derived in ${SCHEME[g.scheme]} coupling` : 'Derivation'}</h3>
      {g.derivation.length === 0 ? <p className="note">The coupling of this level gives no g, so it must be measured.</p> : null}
      <ol className="border-t border-rule">
        {g.derivation.map((step, index) => (
          <li key={index} className="grid grid-cols-[minmax(0,1fr)_auto] gap-x-6 border-b border-rule py-2">
            <span className="min-w-0">
              <span className="note block [&_sub]:text-[0.75em]"><Formula text={step.label} /></span>
              <span className="symbol whitespace-normal! break-words"><Formula text={step.text} /></span>
            </span>
            {step.value === null || step.text.endsWith(`= ${step.value}`) ? null : <span className="symbol num self-end">= {trueMinus(step.value)}</span>}
          </li>
        ))}
      </ol>
    </div>
  )
}

/** The coupled and the measured value on one line, their difference in standard deviations, and which was adopted and why. */
function Comparison({ g }: { g: GFactor }) {
  const deviations = g.difference_in_standard_deviations
  return (
    <div>
      <h3 className="mb-2">Measured against coupled</h3>
      <dl className="facts">
        <dt>Coupled{g.scheme ? `, ${SCHEME[g.scheme]}` : ''}</dt>
        <dd>
          <Quantity value={g.coupled} decimals={9} />
          {g.coupled_exact ? <span className="note"> exactly {trueMinus(g.coupled_exact)} at g<sub>s</sub> = 2</span> : null} {g.coupled === null ? null : <Evidence grade="computed" />}
        </dd>
        {g.scheme !== 'LS' && g.ls !== null ? (
          <>
            <dt>LS</dt>
            <dd><Quantity value={g.ls} decimals={9} /></dd>
          </>
        ) : null}
        <dt>Measured</dt>
        <dd>
          {g.all_measured.length === 0 ? <span className="text-muted">not measured, as far as this table knows</span> : null}
          <ul className="space-y-1">
            {g.all_measured.map((one, index) => (
              <li key={index}>
                <Quantity value={one.value} unc={one.unc} digits={9} /> <SourceRef source={one.source} evidence={one.evidence} />
                {one.unc === null ? <span className="note block">no uncertainty is stated</span> : null}
                {one.note ? <span className="note block">{one.note}</span> : null}
              </li>
            ))}
          </ul>
        </dd>
        {g.difference === null ? null : (
          <>
            <dt>Difference</dt>
            <dd>
              <Quantity value={g.difference} digits={3} sign />
              <span className="note">
                {deviations === null ? ' measured − coupled; without a stated uncertainty it cannot be weighed' : ` measured − coupled, ${fixed(Math.abs(deviations), 1)} standard deviation${fixed(Math.abs(deviations), 1) === '1.0' ? '' : 's'}`}
              </span>
            </dd>
          </>
        )}
        <dt>Adopted</dt>
        <dd>
          <b className="font-semibold"><Quantity value={g.adopted} unc={g.adopted_unc} digits={10} /></b>
          <span className="note block">{g.reason}</span>
        </dd>
        {g.bounds ? (
          <>
            <dt>Bounds</dt>
            <dd className="num">
              {significant(g.bounds.lower, 5)} to {significant(g.bounds.upper, 5)} <span className="note">in any coupling of this configuration</span>
            </dd>
          </>
        ) : null}
      </dl>
    </div>
  )
}
