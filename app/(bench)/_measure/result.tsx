'use client'
import { Printer } from 'lucide-react'
import { GHZ_PER_INVCM } from '@/lib/units/codata'
import type { FieldFitAnswer, FitLineTold } from '@/openapi/schemas/field-fits'
import { Notice } from '@/app/_components/notice'
import { ProblemView } from '@/app/_components/problem-view'
import { Skeleton } from '@/app/_components/skeleton'
import { Warnings } from '@/app/_components/warnings'
import { FieldResult } from './field-result'
import { FittedPattern } from './fitted-pattern'
import { GResult } from './g-result'
import { ResidualPlot, type ResidualUnit } from './residual-plot'
import { headerOf } from './settings'
import { isWavelength, type Row } from './state'
import { BudgetTable, FitNumbers, ResidualsTable } from './tables'
import type { FitState } from './use-fit'
import type { ChosenLine } from './use-lines'
import type { Address, ShownFieldUnit } from './use-measurement'

interface Props {
  fit: FitState
  address: Address
  lines: readonly ChosenLine[]
  rows: readonly Row[]
  places: readonly number[]
  onUnit: (unit: ShownFieldUnit) => void
  onRows: (rows: Row[]) => void
}

/** Residuals are shown in the kind of unit that was measured: pm, MHz, or 10^-3 cm^-1, where rings are too. */
function residualUnit({ quantity, unit }: Pick<Address, 'quantity' | 'unit'>, lines: readonly FitLineTold[]): ResidualUnit {
  if (quantity !== 'ring_radii' && isWavelength(unit)) {
    // d(lambda) = -lambda^2 d(sigma): nm^2 cm^-1 are 1e-7 nm, 1e-4 pm
    return { name: 'pm', perInvcm: lines.map((line) => (-line.wavelength_vac_nm * line.wavelength_vac_nm) / 1e4) }
  }
  const [name, per] = quantity !== 'ring_radii' && (unit === 'GHz' || unit === 'MHz') ? ['MHz', 1000 * GHZ_PER_INVCM] as const : ['10⁻³ cm⁻¹', 1000] as const
  return { name, perInvcm: lines.map(() => per) }
}

/** The scatter that stands for deviations nobody stated. */
function scatterOf(answer: Extract<FieldFitAnswer, { status: 'determined' }>): number | null {
  if (answer.chi_squared !== null || answer.degrees_of_freedom === 0) return null
  return Math.sqrt(answer.residuals.reduce((sum, row) => sum + row.residual_invcm ** 2, 0) / answer.degrees_of_freedom)
}

function Undetermined({ answer }: { answer: Extract<FieldFitAnswer, { status: 'undetermined' }> }) {
  return (
    <Notice tone="warn" role="status" title={answer.unknown === 'g' ? 'These positions do not fix g yet.' : 'These positions do not fix the field yet.'}>
      <ul className="list-disc space-y-1 pl-5">
        {answer.reasons.map((reason) => <li key={reason.code}>{reason.detail}</li>)}
      </ul>
    </Notice>
  )
}

/** What the positions give: the field or g, drawings, tables, and why where they give nothing. */
export function Result({ fit, address, lines, rows, places, onUnit, onRows }: Props) {
  if (fit.error) return <ProblemView error={fit.error} onRetry={fit.retry} />
  const { answer: whole } = fit
  if (!whole) {
    return (
      <>
        <Skeleton label="Fitting" className="mb-4 h-12 max-w-sm" />
        <div aria-hidden="true" className="space-y-5"><div className="skeleton h-24" /><div className="skeleton h-64" /></div>
      </>
    )
  }
  const answer = whole.data
  // reasons already drawn above stand there, not among the warnings
  const warnings = (whole.meta.warnings ?? []).filter((warning) => !['uncertainty_incomplete', 'assignment_ambiguous'].includes(warning.code))
  const take = (components: readonly (readonly { m_lower: number; m_upper: number; q: number }[])[]) => {
    const next = [...rows]
    components.forEach((peak, i) => {
      const [place, only] = [places[i], peak[0]]
      const row = place === undefined ? undefined : next[place]
      if (place === undefined || !row || !only) return
      next[place] = { ...row, assigned: peak.length === 1 ? `c${2 * only.m_lower}.${2 * only.m_upper}` : `g${only.q}` }
    })
    onRows(next)
  }
  return (
    <div aria-busy={fit.waiting} className={`space-y-7 transition-opacity ${fit.waiting ? 'opacity-60' : ''}`}>
      <p role="status" className="sr-only">{fit.waiting ? 'Fitting' : 'Fitted'}</p>
      {answer.status === 'undetermined' ? <Undetermined answer={answer} /> : answer.unknown === 'field' ? <FieldResult answer={answer} unit={address.show} onUnit={onUnit} onTake={take} /> : <GResult answer={answer} />}
      <Warnings meta={{ warnings }} />
      {answer.status === 'determined' ? (
        <>
          {answer.unknown === 'field' ? <div className="print:hidden"><FittedPattern answer={answer} names={lines.map((line) => line.id.replace('~', ' – '))} /></div> : null}
          <Residuals answer={answer} address={address} />
          {answer.unknown === 'field' ? (
            <div>
              <h3 className="mb-2 text-lg font-semibold">What the uncertainty is made of</h3>
              <BudgetTable answer={answer} unit={address.show} />
            </div>
          ) : null}
          <details className="group no-print">
            <summary className="inline-flex min-h-9 list-none items-center">
              <span aria-hidden="true" className="mr-2 inline-block text-lamp-ink transition-transform group-open:rotate-90">▸</span>
              Zeros and covariance
            </summary>
            <div className="mt-2"><FitNumbers answer={answer} /></div>
          </details>
          <p className="no-print flex flex-wrap items-center gap-3">
            <button type="button" className="btn btn-small" onClick={() => window.print()}><Printer size={14} aria-hidden="true" /> Print this fit</button>
            <span className="note">one page: inputs, result, residuals, budget</span>
          </p>
        </>
      ) : null}
    </div>
  )
}

function Residuals({ answer, address }: { answer: Extract<FieldFitAnswer, { status: 'determined' }>; address: Address }) {
  const unit = residualUnit(address, answer.lines)
  const table = <ResidualsTable residuals={answer.residuals} header={headerOf(address)} unit={unit} shownField={address.show} severalLines={answer.lines.length > 1} withInfluence={answer.unknown === 'field'} />
  return (
    <>
      <ResidualPlot residuals={answer.residuals} scatter={scatterOf(answer)} unit={unit} table={table} withInfluence={answer.unknown === 'field'} />
      {table}
    </>
  )
}
