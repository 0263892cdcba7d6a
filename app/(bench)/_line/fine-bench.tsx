'use client'
import { memo, useCallback, useDeferredValue, useMemo, useState } from 'react'
import type { FieldUnit } from '@/lib/units/field'
import { endsOf, lineWithG } from '@/lib/prediction/components'
import { multipletOf } from '@/lib/prediction/split'
import { twoJOf } from '@/lib/prediction/levels'
import { wholeTerm } from '@/lib/prediction/term-levels'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { Part } from '@/app/_components/page-head'
import { ComponentCurves } from '@/app/_components/plots/component-curves'
import { findSublevels, pointOf, useLevelFan } from '@/app/_components/plots/level-fan'
import { PatternPlot } from '@/app/_components/plots/pattern-plot'
import { Choices } from '@/app/_components/plots/plot-frame'
import { SplittingDiagram, type SplitLevel } from '@/app/_components/plots/splitting-diagram'
import { SublevelFan } from '@/app/_components/plots/sublevel-fan'
import { Warnings } from '@/app/_components/warnings'
import { ComponentsTable } from './components-table'
import { ProfilePart } from './profile-part'
import { SignConvention } from './sign-convention'
import type { Prediction, PredictionAsked } from './use-prediction'
import { ValidityPart } from './validity-part'

type Predicted = Prediction & { ok: true }
type End = 'lower' | 'upper'

const foundLevel = (line: TransitionDetail, end: End) => ({ level: line[end], members: line.terms[end], diamagnetic: line.diamagnetic[end] })

/** An end of the line at the field, in the model that its components were computed with. */
function useSplit(line: TransitionDetail, end: End, { fieldTesla, quadratic }: PredictionAsked, model: 'linear' | 'intermediate'): SplitLevel {
  return useMemo(() => {
    const level = line[end]
    const found = findSublevels(foundLevel(line, end), { model, fieldTesla, quadratic })
    return { configuration: level.configuration, symbol: level.term.symbol, twoJ: twoJOf(level), points: found.ok ? found.rows.map(pointOf) : [] }
  }, [line, end, fieldTesla, quadratic, model])
}

interface FineBenchProps {
  line: TransitionDetail
  prediction: Predicted
  asked: PredictionAsked
  /** The same a frame or two later. */
  settledAsked: PredictionAsked
  fieldUnit: FieldUnit
  onField: (tesla: number) => void
}

const LAW = { linear: 'linear law', intermediate: 'intermediate model' } as const

/** The line without nuclear spin: its pattern and splitting at the field, what the field does to both, and all numbers. */
export function FineBench({ line, prediction, asked, settledAsked, fieldUnit, onField }: FineBenchProps) {
  const [active, setActive] = useState<string | null>(null)
  const settled = useDeferredValue(prediction)
  const { components } = prediction
  const upper = useSplit(line, 'upper', asked, components.model)
  const lower = useSplit(line, 'lower', asked, components.model)
  const name = line.id.replace('~', '_')
  const shared = { fieldTesla: asked.fieldTesla, thetaDeg: asked.thetaDeg, active, onActive: setActive, name }
  return (
    <>
      <div className="mt-7 grid gap-x-8 gap-y-8 xl:grid-cols-[minmax(0,1.12fr)_minmax(0,1fr)]">
        <PatternPlot {...shared} components={components.components} medium={line.conventional_medium} />
        <SplittingDiagram {...shared} components={components.components} lower={lower} upper={upper} law={LAW[components.model]} />
      </div>
      <AgainstField line={line} prediction={settled} asked={settledAsked} fieldUnit={fieldUnit} onField={onField} active={active} onActive={setActive} />
      <Numbers line={line} prediction={settled} active={active} />
      <ProfilePart line={line} asked={settledAsked} />
      <ValidityPart validity={settled.components.validity} fieldTesla={settled.components.field_tesla} model={settled.components.model} />
    </>
  )
}

/** The multiplet of the line where both terms are whole and a field mixes any of their levels. */
function mixedMultiplet(line: TransitionDetail) {
  const choice = { gValues: 'adopted', gS: null } as const
  const ends = endsOf(lineWithG(line, choice), choice)
  const [lower, upper] = [wholeTerm(ends.lower), wholeTerm(ends.upper)]
  return lower !== null && upper !== null && lower.levels.length + upper.levels.length > 2 ? multipletOf(line, { lower, upper }, null) : null
}

interface AgainstFieldProps {
  line: TransitionDetail
  prediction: Predicted
  asked: PredictionAsked
  fieldUnit: FieldUnit
  onField: (tesla: number) => void
  active: string | null
  onActive: (key: string | null) => void
}

/** Sublevels and components as curves over the field: where the linear law fails, and what comes after it. */
const AgainstField = memo(function AgainstField({ line, prediction, asked, fieldUnit, onField, active, onActive }: AgainstFieldProps) {
  const { components, validity, model } = prediction.components
  const { levels, positions } = validity
  // the end that leaves the linear law first is the one to see
  const [end, setEnd] = useState<End>(() => ((levels.lower.relative_error ?? 0) > (levels.upper.relative_error ?? 0) || (line.upper.term.j === 0 && line.lower.term.j > 0) ? 'lower' : 'upper'))
  const found = useMemo(() => foundLevel(line, end), [line, end])
  const { here, fanTo } = useLevelFan(found, { model: asked.model === 'linear' ? 'linear' : model, fieldTesla: asked.fieldTesla, quadratic: asked.quadratic })
  const curvesTo = useCallback((edge: number) => fanTo(edge), [fanTo])
  const multiplet = useMemo(() => (asked.model === 'linear' ? null : mixedMultiplet(line)), [asked.model, line])
  const pair = useMemo(() => ({ twoJLower: twoJOf(line.lower), twoJUpper: twoJOf(line.upper) }), [line])
  const name = line.id.replace('~', '_')
  return (
    <div className={`mt-8 grid gap-x-8 gap-y-8 ${multiplet === null ? '' : 'xl:grid-cols-[minmax(0,1.12fr)_minmax(0,1fr)]'}`}>
      {multiplet === null ? null : (
        <ComponentCurves {...{ multiplet, pair, components, fieldUnit, active, onActive, onField, name }} fieldTesla={asked.fieldTesla} thetaDeg={asked.thetaDeg} limitTesla={positions.field_limit_tesla} />
      )}
      <SublevelFan
        fanTo={curvesTo}
        here={here}
        fieldTesla={asked.fieldTesla}
        fieldUnit={fieldUnit}
        limitTesla={levels[end].field_limit_tesla}
        tolerance={levels[end].tolerance}
        onField={onField}
        name={`${name}-${end}`}
        controls={<Choices label="Level" value={end} choices={ENDS} onChange={setEnd} />}
        caption={`Sublevels of the ${end} level at ${asked.fieldTesla} T, ${LAW[model]}`}
      />
    </div>
  )
})

const ENDS = [
  { value: 'upper', label: 'upper' },
  { value: 'lower', label: 'lower' },
] as const

interface NumbersProps {
  line: TransitionDetail
  prediction: Predicted
  active: string | null
}

/** Everything in words and figures that follows the field. */
const Numbers = memo(function Numbers({ line, prediction, active }: NumbersProps) {
  const { components, warnings } = prediction
  return (
    <>
      <SignConvention thetaDeg={components.theta_deg} kind={line.kind} sums="each" />
      <Warnings meta={{ warnings }} />
      <Part title="Components" aside={`At ${components.field_tesla}\u202fT, ${LAW[components.model]}, adopted g values`}>
        <ComponentsTable answer={components} medium={line.conventional_medium} active={active} />
      </Part>
    </>
  )
})
