'use client'
import { useCallback, useDeferredValue, useMemo } from 'react'
import { DEFAULT_TOLERANCE } from '@/lib/atomic/validity'
import { halves, significant } from '@/app/_components/number'
import type { LevelDetail } from '@/openapi/schemas/level'
import type { LevelValidity } from '@/openapi/schemas/validity'
import { FieldControl } from '@/app/_components/field/field-control'
import { ModelControl } from '@/app/_components/field/model-control'
import { useField } from '@/app/_components/field/use-field'
import { type ModelAsked, useModel, useNucleus, useQuadratic } from '@/app/_components/field/use-model'
import { Notice } from '@/app/_components/notice'
import { Part } from '@/app/_components/page-head'
import { useLevelFan } from '@/app/_components/plots/level-fan'
import { SublevelFan } from '@/app/_components/plots/sublevel-fan'
import { Skeleton } from '@/app/_components/skeleton'
import { Warnings } from '@/app/_components/warnings'
import { modelWords } from '../_parts/model-words'
import { CrossingsPart } from './crossings-part'
import { NuclearSublevels } from './nuclear-sublevels'
import { SublevelTable } from './sublevel-table'
import { useFieldLevel, type FieldLevelRead } from './use-field-level'

/** The linear law of this level in a sentence, whatever model is in force. */
function verdictOf(validity: LevelValidity, inForce: 'linear' | 'intermediate'): string {
  const { status, error_invcm: error, relative_to_shift: own, tolerance, field_limit_tesla: limit, missing_j } = validity
  if (error === null) return 'whether the linear law holds is not known, since the level has no S and L'
  const least = status === 'unknown' ? 'at least ' : ''
  const missing = missing_j.length > 0 ? `; the table lacks J = ${missing_j.map(halves).join(', ')} of this term` : ''
  if (error === 0 && limit === null) return `the linear law is exact within the term${missing}`
  const size = `${least}${significant(error, 3)} cm⁻¹${own === null ? '' : `, ${significant(own * 100, 2)} % of its own largest linear shift`}`
  const passed = limit === null ? '' : limit === 0 ? `; ${tolerance * 100} % of μB·B is passed at any field` : `; ${tolerance * 100} % of μB·B is passed at ${significant(limit, 3)} T`
  return `${inForce === 'intermediate' ? 'the linear law would be' : 'the linear law is'} off by up to ${size}${passed}${missing}`
}

/** The sublevels of the level in a field, in the model chosen, and how far the linear law may be trusted. */
export function LevelBench({ level }: { level: LevelDetail }) {
  const { field, setField, problem } = useField()
  const [model, setModel] = useModel()
  const [quadratic, setQuadratic] = useQuadratic()
  const [nucleus, setNucleus] = useNucleus()
  const read = useFieldLevel(level)
  const { unit } = field
  const toField = useCallback((tesla: number) => setField({ tesla, unit }), [setField, unit])
  const asked = useMemo(() => ({ model, fieldTesla: field.tesla, quadratic }), [model, field.tesla, quadratic])
  const { sublevels, here, fanTo } = useLevelFan(read.found, asked)
  const isotopes = useMemo(() => level.hyperfine_constants.filter((one) => one.a_mhz !== null).map((one) => one.mass_number).sort((a, b) => a - b), [level])
  const validity = sublevels?.ok ? sublevels.validity : null
  const inForce = sublevels?.ok ? sublevels.model : 'linear'
  const bends = read.found?.diamagnetic.status === 'ok'
  const settled = useDeferredValue(sublevels)

  return (
    <>
      <Part title="In a field">
        <FieldControl
          value={field}
          onChange={setField}
          problem={problem}
          model={nucleus.on ? 'hyperfine (diagonalised within J)' : modelWords(inForce, model)}
          verdict={read.failed ? 'The other levels of this term could not be read.' : validity === null ? 'The other levels of this term are being read.' : `${verdictOf(validity, nucleus.on ? 'linear' : inForce)}.`}
          tone={inForce === 'intermediate' && !nucleus.on ? 'valid' : (validity?.status ?? 'unknown')}
          limitTesla={validity?.field_limit_tesla ?? null}
        />
        <ModelControl
          model={model}
          onModel={setModel}
          nucleus={isotopes.length === 0 && !nucleus.on ? null : { ...nucleus, onChange: setNucleus, isotopes, natural: false, element: level.species.split('-')[0] ?? '' }}
          quadratic={bends || quadratic ? { on: quadratic, onChange: setQuadratic } : null}
        />
        <div className="mt-6">
          {nucleus.on ? (
            <NuclearSublevels level={level} isotopes={read.isotopes} isotope={nucleus.isotope === 'natural' ? null : nucleus.isotope} field={field} onField={toField} />
          ) : sublevels === null ? (
            <Waiting read={read} />
          ) : !sublevels.ok ? (
            <Notice tone="warn" title="The sublevels cannot be drawn."><p>{sublevels.detail}</p></Notice>
          ) : level.term.j > 0 && sublevels.g === null && sublevels.model === 'linear' ? (
            <Notice tone="warn" title="The sublevels cannot be drawn."><p>This level has no g in its coupling and none is measured.</p></Notice>
          ) : (
            <>
              <SublevelFan
                fanTo={fanTo}
                here={here}
                fieldTesla={field.tesla}
                fieldUnit={unit}
                limitTesla={validity?.field_limit_tesla ?? null}
                tolerance={validity?.tolerance ?? DEFAULT_TOLERANCE}
                onField={toField}
                name={level.id}
                caption={captionOf(field.tesla, inForce, model)}
              />
              {settled?.ok ? (
                <>
                  <Warnings meta={{ warnings: settled.warnings }} quiet />
                  <SublevelTable level={level.id} fieldTesla={field.tesla} rows={settled.rows} model={settled.model} quadratic={quadratic} />
                </>
              ) : null}
            </>
          )}
        </div>
      </Part>
      {read.found === null || (level.term.j === 0 && read.found.members.levels.length < 2 && !nucleus.on) ? null : <CrossingsPart level={level} found={read.found} isotopes={read.isotopes} nucleus={nucleus} />}
    </>
  )
}

const captionOf = (fieldTesla: number, inForce: 'linear' | 'intermediate', asked: ModelAsked): string => `Sublevels at ${fieldTesla} T, ${modelWords(inForce, asked)}`

function Waiting({ read }: { read: FieldLevelRead }) {
  if (read.failed) return <Notice tone="warn" title="The sublevels cannot be drawn."><p>The other levels of this term could not be read. Reload the page to try again.</p></Notice>
  return <Skeleton label="Reading the other levels of this term" className="h-96" />
}
