'use client'
import { memo, useCallback, useMemo, useState } from 'react'
import { GHZ_PER_INVCM, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import type { FieldUnit } from '@/lib/units/field'
import type { HyperfineComponent, HyperfineComponents } from '@/openapi/schemas/components'
import type { Isotope } from '@/openapi/schemas/species'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import type { IsotopeChosen } from '@/app/_components/field/use-model'
import { Notice } from '@/app/_components/notice'
import { halves } from '@/app/_components/number'
import { Part } from '@/app/_components/page-head'
import type { DrawnComponent } from '@/app/_components/plots/component-text'
import { useNuclearFan } from '@/app/_components/plots/nuclear-fan'
import { PatternPlot } from '@/app/_components/plots/pattern-plot'
import { Choices } from '@/app/_components/plots/plot-frame'
import { SublevelFan } from '@/app/_components/plots/sublevel-fan'
import { ProblemView } from '@/app/_components/problem-view'
import { Skeleton } from '@/app/_components/skeleton'
import { useResting } from '@/app/_components/use-resting'
import { Warnings } from '@/app/_components/warnings'
import { NuclearTable } from './nuclear-table'
import { nuclearKey } from './nuclear-key'
import { ProfilePart } from './profile-part'
import { SignConvention } from './sign-convention'
import { type NuclearPrediction, type PredictionAsked, useNuclearPrediction } from './use-prediction'
import type { ProfiledNucleus } from './use-profile'
import { ValidityPart } from './validity-part'

type End = 'lower' | 'upper'

const UNITS = ['mhz', 'ghz', 'invcm', 'lorentz', 'pm'] as const

/** F and m_F, the first being null where two of one m_F coincide at zero field. */
const sublevel = (f: number | null, m: number): string => (f === null ? `(${halves(m)})` : `(${halves(f)}, ${halves(m)})`)

function drawn(component: HyperfineComponent, answer: HyperfineComponents): DrawnComponent {
  const { f_lower, m_f_lower, f_upper, m_f_upper, q, detuning_mhz, shift_invcm, shift_ghz, shift_pm, strength, weight, intensity, mass_number } = component
  const lorentz = MU_B_OVER_HC_INVCM_PER_T * answer.field_tesla
  const isotope = answer.isotopes.length > 1 ? `${mass_number}: ` : ''
  return {
    key: nuclearKey(component),
    ends: `${isotope}${sublevel(f_lower, m_f_lower)} → ${sublevel(f_upper, m_f_upper)}`,
    m_lower: m_f_lower,
    m_upper: m_f_upper,
    polarisation: component.polarisation,
    q,
    shift_lorentz: lorentz === 0 ? null : shift_invcm / lorentz,
    shift_invcm,
    shift_ghz,
    shift_mhz: detuning_mhz,
    shift_pm,
    strength: strength * weight,
    intensity,
  }
}

interface NuclearBenchProps {
  line: TransitionDetail
  /** Null while they are being read. */
  isotopes: readonly Isotope[] | null
  error: Error | null
  isotope: IsotopeChosen
  asked: PredictionAsked
  fieldUnit: FieldUnit
  onField: (tesla: number) => void
}

/** The line of one isotope, or of the natural mixture, with nuclear spin. */
export const NuclearBench = memo(function NuclearBench({ line, isotopes, error, isotope, asked: moving, fieldUnit, onField }: NuclearBenchProps) {
  const [active, setActive] = useState<string | null>(null)
  // several isotopes at once are too much to draw at every step of a drag; of one the tables and the profile wait for its end
  const standing = useResting(moving)
  const asked = isotope === 'natural' ? standing : moving
  const prediction = useNuclearPrediction(line, isotopes, isotope, asked.fieldTesla, asked.thetaDeg)
  const rested = useResting(prediction, isotope === 'natural' ? 0 : undefined)
  const components = useMemo(() => (prediction?.ok ? prediction.components.components.filter((one) => one.strength > 1e-9).map((one) => drawn(one, prediction.components)) : []), [prediction])
  const nuclear = useMemo(() => (isotopes === null ? null : { isotopes, isotope }), [isotopes, isotope])
  if (error) return <div className="mt-6"><ProblemView error={error} heading="h2" /></div>
  if (prediction === null || isotopes === null) return <Skeleton label="Reading the isotopes" className="mt-7 h-96" />
  if (!prediction.ok) {
    return (
      <div className="mt-6">
        <Notice tone="warn" title="No hyperfine pattern can be computed."><p>{prediction.detail}</p></Notice>
      </div>
    )
  }
  const answer = prediction.components
  const name = line.id.replace('~', '_')
  return (
    <>
      <div className="mt-7 grid gap-x-8 gap-y-8 xl:grid-cols-[minmax(0,1.12fr)_minmax(0,1fr)]">
        <PatternPlot components={components} medium={line.conventional_medium} fieldTesla={asked.fieldTesla} thetaDeg={asked.thetaDeg} active={active} onActive={setActive} name={`${name}-hyperfine`} title="Hyperfine pattern" units={UNITS}
          note="Detuning is from the line between the centres of gravity of both levels." />
        <NuclearFan line={line} isotopes={isotopes} answer={answer} fieldUnit={fieldUnit} onField={onField} />
      </div>
      <SignConvention thetaDeg={answer.theta_deg} kind={line.kind} sums="isotope" />
      {rested?.ok ? <NuclearNumbers line={line} prediction={rested} asked={standing} active={active} nuclear={nuclear} /> : null}
    </>
  )
})

interface NuclearNumbersProps {
  line: TransitionDetail
  prediction: NuclearPrediction & { ok: true }
  asked: PredictionAsked
  active: string | null
  nuclear: ProfiledNucleus | null
}

/** Everything in words and figures. */
function NuclearNumbers({ line, prediction, asked, active, nuclear }: NuclearNumbersProps) {
  const { components: answer, warnings } = prediction
  return (
    <>
      <Warnings meta={{ warnings }} />
      <Part title="Hyperfine components" aside={`At ${answer.field_tesla}\u202fT, which is ${Number(answer.field_gauss.toPrecision(10))}\u202fG`}>
        <NuclearTable answer={answer} active={active} />
      </Part>
      <ProfilePart line={line} asked={asked} nuclear={nuclear} />
      <ValidityPart validity={answer.validity} fieldTesla={answer.field_tesla} model="hyperfine" />
    </>
  )
}

interface NuclearFanProps {
  line: TransitionDetail
  isotopes: readonly Isotope[]
  answer: HyperfineComponents
  fieldUnit: FieldUnit
  onField: (tesla: number) => void
}

/** The sublevels F of either end, of the heaviest-weighing isotope that has constants. */
function NuclearFan({ line, isotopes, answer, fieldUnit, onField }: NuclearFanProps) {
  const [end, setEnd] = useState<End>('lower')
  const constants = line.hyperfine[end]
  const shown = [...answer.isotopes].sort((a, b) => b.weight - a.weight).find((one) => (one.nuclear_spin ?? 0) > 0) ?? answer.isotopes[0]
  const massNumber = shown?.mass_number ?? null
  const found = useMemo(() => ({ level: line[end], constants, isotopes }), [line, end, constants, isotopes])
  const { here, fanTo, problem } = useNuclearFan(found, massNumber, answer.field_tesla)
  const curves = useCallback((edge: number) => fanTo(edge), [fanTo])
  const choice = <Choices label="Level" value={end} choices={ENDS} onChange={setEnd} />
  if (problem !== null) {
    return (
      <div>
        {choice}
        <div className="mt-3"><Notice title={`The sublevels of the ${end} level are not drawn.`}><p>{problem}</p></Notice></div>
      </div>
    )
  }
  return (
    <SublevelFan
      key={end}
      nuclear
      fanTo={curves}
      here={here}
      fieldTesla={answer.field_tesla}
      fieldUnit={fieldUnit}
      limitTesla={null}
      tolerance={0.01}
      onField={onField}
      name={`${line.id.replace('~', '_')}-${end}-hyperfine`}
      title={answer.isotopes.length > 1 ? `Sublevels of mass number ${massNumber ?? ''}` : 'Sublevels against field'}
      controls={choice}
      caption={`Hyperfine sublevels of the ${end} level at ${answer.field_tesla} T, 1 cm⁻¹ being ${GHZ_PER_INVCM} GHz`}
    />
  )
}

const ENDS = [
  { value: 'upper', label: 'upper' },
  { value: 'lower', label: 'lower' },
] as const
