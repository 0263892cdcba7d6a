'use client'
import { useQuery } from '@tanstack/react-query'
import { useCallback, useDeferredValue, useMemo } from 'react'
import type { Species } from '@/openapi/schemas/species'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { AngleControl } from '@/app/_components/field/angle-control'
import { FieldControl } from '@/app/_components/field/field-control'
import { ModelControl } from '@/app/_components/field/model-control'
import { useAngle, useField } from '@/app/_components/field/use-field'
import { useModel, useNucleus, useQuadratic } from '@/app/_components/field/use-model'
import { Notice } from '@/app/_components/notice'
import { modelWords } from '../_parts/model-words'
import { FineBench } from './fine-bench'
import { NuclearBench } from './nuclear-bench'
import { usePrediction } from './use-prediction'
import { shortVerdict, worse } from './verdict-words'

/** Mass numbers with a constant A for an end of the line. */
const isotopesOf = ({ hyperfine }: TransitionDetail): number[] =>
  [...new Set([...hyperfine.lower, ...hyperfine.upper].filter((one) => one.a_mhz !== null).map((one) => one.mass_number))].sort((a, b) => a - b)

/** The bench of a line: its field, its angle, its model, and everything that follows them. */
export function LineBench({ line }: { line: TransitionDetail }) {
  const { param: edition } = useEdition()
  const { field, setField, problem: fieldProblem } = useField()
  const { thetaDeg, setThetaDeg, problem: angleProblem } = useAngle()
  const [model, setModel] = useModel()
  const [quadratic, setQuadratic] = useQuadratic()
  const [nucleus, setNucleus] = useNucleus()
  const isotopes = useMemo(() => isotopesOf(line), [line])
  const species = useQuery({ ...apiQuery<Species>(`/species/${line.lower.species}`, { edition }), enabled: nucleus.on })
  const asked = useMemo(() => ({ fieldTesla: field.tesla, thetaDeg, model, quadratic }), [field.tesla, thetaDeg, model, quadratic])
  const prediction = usePrediction(line, asked)
  const { unit } = field
  const toField = useCallback((tesla: number) => setField({ tesla, unit }), [setField, unit])
  // Drawings of one field follow the slider; curves, profile and tables may lag a frame or two, so that no step of a drag waits for them.
  const settledAsked = useDeferredValue(asked)
  const validity = prediction.ok ? prediction.components.validity : null
  const inForce = prediction.ok ? prediction.components.model : 'linear'
  const bends = line.diamagnetic.lower.status === 'ok' || line.diamagnetic.upper.status === 'ok'
  const linearStatus = validity ? worse(validity.positions.status, validity.strengths.status) : 'unknown'

  return (
    <>
      <FieldControl
        value={field}
        onChange={setField}
        problem={fieldProblem}
        model={nucleus.on ? 'hyperfine (diagonalised within one J)' : modelWords(inForce, model)}
        tone={!nucleus.on && inForce === 'intermediate' ? 'valid' : linearStatus}
        verdict={validity ? shortVerdict(validity, line, nucleus.on ? 'linear' : inForce) : undefined}
        limitTesla={validity?.positions.field_limit_tesla ?? null}
      />
      <ModelControl
        model={model}
        onModel={setModel}
        nucleus={isotopes.length === 0 && !nucleus.on ? null : { ...nucleus, onChange: setNucleus, isotopes, natural: isotopes.length > 0, element: line.lower.species.split('-')[0] ?? '' }}
        quadratic={bends || quadratic ? { on: quadratic, onChange: setQuadratic } : null}
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
      ) : nucleus.on ? (
        <NuclearBench line={line} isotopes={species.data?.data.isotopes ?? null} error={species.error} isotope={nucleus.isotope} asked={settledAsked} fieldUnit={unit} onField={toField} />
      ) : (
        <FineBench line={line} prediction={prediction} asked={asked} settledAsked={settledAsked} fieldUnit={unit} onField={toField} />
      )}
    </>
  )
}
