'use client'
import { useQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import { DEFAULT_TOLERANCE, levelValidity, type LevelValidity } from '@/lib/atomic/validity'
import { levelSentence } from '@/lib/atomic/validity-sentence'
import type { Level, LevelDetail } from '@/openapi/schemas/level'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { FieldControl } from '@/app/_components/field/field-control'
import { useField } from '@/app/_components/field/use-field'
import { Notice } from '@/app/_components/notice'
import { Part } from '@/app/_components/page-head'
import { SublevelFan } from '@/app/_components/plots/sublevel-fan'

const twice = (value: number): number => Math.round(2 * value)

/** The levels of this level's term that the edition holds: same configuration with parents, label, S, L and parity. */
function useTerm(level: Level): { members: Level[] | null; failed: boolean } {
  const { param: edition } = useEdition()
  const { s, l, parity, label } = level.term
  const known = level.coupling === 'LS' && s !== null && l !== null
  const { data, isError } = useQuery({ ...apiQuery<Level[]>('/levels', { species: [level.species], s, l, parity, limit: 1000, edition }), enabled: known })
  const members = useMemo(
    () =>
      data?.data.filter((other) => other.coupling === 'LS' && other.configuration === level.configuration && other.term.label === label && other.repeat_index === level.repeat_index) ?? null,
    [data, level.configuration, level.repeat_index, label],
  )
  return { members, failed: isError }
}

/** The sublevels of the level in a field, and how far the linear law that draws them may be trusted. */
export function LevelBench({ level }: { level: LevelDetail }) {
  const { field, setField, problem } = useField()
  const { members, failed } = useTerm(level)
  const { s, l, j } = level.term
  const g = level.g_j.adopted
  const validity = useMemo((): LevelValidity | null => {
    if (level.coupling !== 'LS' || s === null || l === null) return levelValidity({ twoJ: twice(j), g, term: null }, field.tesla)
    if (members === null) return null
    const levels = members.map((one) => ({ twoJ: twice(one.term.j), energyInvcm: one.energy_invcm, g: one.g_j.adopted }))
    return levelValidity({ twoJ: twice(j), g, term: { twoS: twice(s), l, levels } }, field.tesla)
  }, [members, level.coupling, s, l, j, g, field.tesla])
  const verdict = failed ? 'The other levels of this term could not be read.' : validity === null ? 'The other levels of this term are being read.' : levelSentence('This level', validity)

  return (
    <Part title="In a field">
      <FieldControl value={field} onChange={setField} problem={problem} verdict={verdict} tone={validity?.status ?? 'unknown'} limitTesla={validity?.fieldLimitTesla ?? null} />
      <div className="mt-6">
        {j > 0 && g === null ? (
          <Notice tone="warn" title="The sublevels cannot be drawn.">
            <p>This level has no g in its coupling and none is measured.</p>
          </Notice>
        ) : (
          <SublevelFan
            twoJ={twice(j)}
            g={g}
            fieldTesla={field.tesla}
            fieldUnit={field.unit}
            limitTesla={validity?.fieldLimitTesla ?? null}
            tolerance={validity?.tolerance ?? DEFAULT_TOLERANCE}
            onField={(tesla) => setField({ tesla, unit: field.unit })}
            name={level.id}
          />
        )}
      </div>
    </Part>
  )
}
