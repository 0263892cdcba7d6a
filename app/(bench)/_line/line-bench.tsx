'use client'
import { memo, useDeferredValue, useMemo, useState } from 'react'
import type { Level } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { AngleControl } from '@/app/_components/field/angle-control'
import { FieldControl } from '@/app/_components/field/field-control'
import { useAngle, useField } from '@/app/_components/field/use-field'
import { Notice } from '@/app/_components/notice'
import { Part } from '@/app/_components/page-head'
import { PatternPlot } from '@/app/_components/plots/pattern-plot'
import { SplittingDiagram, type SplitLevel } from '@/app/_components/plots/splitting-diagram'
import { Warnings } from '@/app/_components/warnings'
import { ComponentsTable } from './components-table'
import { usePrediction, type Prediction } from './use-prediction'
import { ValidityPart } from './validity-part'
import { shortVerdict, worse } from './verdict-words'

const splitLevel = (level: Level): SplitLevel => ({ configuration: level.configuration, symbol: level.term.symbol, twoJ: Math.round(2 * level.term.j), g: level.g_j.adopted })

/** The bench of a line: its field, its angle, and everything that follows them. */
export function LineBench({ line }: { line: TransitionDetail }) {
  const { field, setField, problem: fieldProblem } = useField()
  const { thetaDeg, setThetaDeg, problem: angleProblem } = useAngle()
  const [active, setActive] = useState<string | null>(null)
  const prediction = usePrediction(line, field.tesla, thetaDeg)
  // The drawings follow the slider; the tables below may lag a frame or two, so that no step of a drag waits for them.
  const settled = useDeferredValue(prediction)
  const validity = prediction.ok ? prediction.components.validity : null
  const ends = useMemo(() => ({ lower: splitLevel(line.lower), upper: splitLevel(line.upper) }), [line])
  const name = line.id.replace('~', '_')
  const shared = { fieldTesla: field.tesla, thetaDeg, active, onActive: setActive, name }

  return (
    <>
      <FieldControl
        value={field}
        onChange={setField}
        problem={fieldProblem}
        model="linear (weak field)"
        tone={validity ? worse(validity.positions.status, validity.strengths.status) : 'unknown'}
        verdict={validity ? shortVerdict(validity, line) : undefined}
        limitTesla={validity?.positions.field_limit_tesla ?? null}
      />
      <div className="mt-3">
        <AngleControl value={thetaDeg} onChange={setThetaDeg} problem={angleProblem} />
      </div>
      {!prediction.ok ? (
        <div className="mt-6">
          <Notice tone="warn" title="No pattern can be computed for this line.">
            <p>{prediction.detail}</p>
          </Notice>
        </div>
      ) : (
        <>
          <div className="mt-7 grid gap-x-8 gap-y-8 xl:grid-cols-[minmax(0,1.12fr)_minmax(0,1fr)]">
            <PatternPlot {...shared} components={prediction.components.components} medium={line.conventional_medium} />
            <SplittingDiagram {...shared} components={prediction.components.components} {...ends} />
          </div>
          <Numbers line={line} prediction={settled} active={active} />
        </>
      )}
    </>
  )
}

interface NumbersProps {
  line: TransitionDetail
  prediction: Prediction
  active: string | null
}

/** Everything in words and figures that follows the field. */
const Numbers = memo(function Numbers({ line, prediction, active }: NumbersProps) {
  if (!prediction.ok) return null
  const { components, warnings } = prediction
  return (
    <>
      <SignConvention thetaDeg={components.theta_deg} kind={line.kind} />
      <Warnings meta={{ warnings }} />
      <Part title="Components" aside={`At ${components.field_tesla}\u202fT, linear law, adopted g values`}>
        <ComponentsTable answer={components} medium={line.conventional_medium} active={active} />
      </Part>
      <ValidityPart validity={components.validity} fieldTesla={components.field_tesla} />
    </>
  )
})

/** What the signs mean, wherever σ+ and σ− are shown. */
function SignConvention({ thetaDeg, kind }: { thetaDeg: number | null; kind: string }) {
  return (
    <p className="note mt-4 max-w-[60rem]">
      q = m<sub>upper</sub> − m<sub>lower</sub> is the same in absorption and emission: q = 0 is π, q = +1 σ+, q = −1 σ−. A positive shift is to higher wavenumber, to the blue.
      The strengths of each q sum to 1.{' '}
      {thetaDeg === null
        ? 'Without an angle heights are strengths; intensities in the table are averaged over angle.'
        : `Heights are intensities seen at ${thetaDeg}° to the field, and the whole line sums to 1 at every angle.`}
      {kind === 'E2' ? ' The angular intensity of quadrupole lines is not computed.' : ' Stokes V > 0 is counter-clockwise as the observer sees it, Q > 0 along the field projected on the sky, in emission.'}
    </p>
  )
}
