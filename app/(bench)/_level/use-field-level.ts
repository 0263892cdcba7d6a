'use client'
import { useQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import { coupledRange } from '@/lib/atomic/half'
import { levelDiamagnetic } from '@/lib/prediction/diamagnetic'
import type { FieldLevel } from '@/lib/prediction/level-sublevels'
import { twice } from '@/lib/prediction/levels'
import type { MembersTold } from '@/lib/prediction/term-levels'
import type { Level, LevelDetail } from '@/openapi/schemas/level'
import type { Isotope, Species } from '@/openapi/schemas/species'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'

/** A level alone, where it has no S and L. */
const alone = ({ term }: Level): MembersTold => ({ s: term.s, l: term.l, levels: [], missing_j: [] })

function membersOf(levels: readonly Level[], { term }: Level): MembersTold {
  const held = new Set(levels.map((member) => twice(member.term.j)))
  return {
    s: term.s,
    l: term.l,
    levels: levels.map((member) => ({ id: member.id, j: member.term.j, energy_invcm: member.energy_invcm, energy_unc_invcm: member.energy_unc_invcm, g_j: member.g_j.adopted, g_j_unc: member.g_j.adopted_unc })),
    missing_j: coupledRange(twice(term.s ?? 0), 2 * (term.l ?? 0)).filter((twoJ) => !held.has(twoJ)).map((twoJ) => twoJ / 2),
  }
}

export interface FieldLevelRead {
  /** The level with all that its sublevels follow from; null while that is being read. */
  found: FieldLevel | null
  /** Of the species; null while they are being read. */
  isotopes: readonly Isotope[] | null
  failed: boolean
}

/** The levels of this level's term that the edition holds (same configuration with parents, label, S, L and parity), and its species. */
export function useFieldLevel(level: LevelDetail): FieldLevelRead {
  const { param: edition } = useEdition()
  const { s, l, parity, label } = level.term
  const known = level.coupling === 'LS' && s !== null && l !== null
  const term = useQuery({ ...apiQuery<Level[]>('/levels', { species: [level.species], s, l, parity, limit: 1000, edition }), enabled: known })
  const species = useQuery(apiQuery<Species>(`/species/${level.species}`, { edition }))
  const found = useMemo((): FieldLevel | null => {
    if (species.data === undefined || (known && term.data === undefined)) return null
    const members = (term.data?.data ?? []).filter((other) => other.coupling === 'LS' && other.configuration === level.configuration && other.term.label === label && other.repeat_index === level.repeat_index)
    return { level, members: known ? membersOf(members, level) : alone(level), diamagnetic: levelDiamagnetic(level, species.data.data) }
  }, [level, label, known, term.data, species.data])
  return { found, isotopes: species.data?.data.isotopes ?? null, failed: term.isError || species.isError }
}
