import { termNotPure } from '@/lib/atomic/adopted'
import { AIR_FROM_NM, airWavelength } from '@/lib/atomic/air'
import { MU_B_OVER_H_GHZ_PER_T } from '@/lib/atomic/constants'
import { landeG } from '@/lib/atomic/lande'
import type { ComponentsAsked, PredictedLine } from '@/lib/prediction/components'
import { AIR_EXTRAPOLATED } from '@/lib/prediction/conventions'
import type { ChosenG } from '@/lib/prediction/g-values'
import { twice } from '@/lib/prediction/levels'
import type { MembersTold } from '@/lib/prediction/term-levels'
import type { Level } from '@/openapi/schemas/level'

export interface Warning {
  code: string
  detail: string
}

interface UsedEnd {
  level: Level
  chosen: ChosenG
}

const notPure = (id: string, g: number, ls: number | null): Warning[] =>
  termNotPure(g, ls) ? [{ code: 'term_not_pure', detail: `The measured g_J of ${id}, ${g}, is more than 0.5 % from the LS value ${ls ?? 0}: its term is not pure.` }] : []

/** What is to be known of the g_J of one level that is used. */
export function gWarnings({ level, chosen }: UsedEnd, gValues: ComponentsAsked['gValues']): Warning[] {
  const warnings: Warning[] = []
  if (gValues === 'adopted' && level.g_j.basis === 'measured' && chosen.unc === null) {
    warnings.push({ code: 'g_unc_unknown', detail: `The measured g_J of ${level.id} has no stated uncertainty.` })
  }
  if (level.g_j.measured !== null) warnings.push(...notPure(level.id, level.g_j.measured, level.g_j.ls))
  return warnings
}

/** Where a g_s that was given does not reach: adopted values that are not computed. */
export function gSWarnings(levels: readonly Level[], { gS, gValues }: Pick<ComponentsAsked, 'gS' | 'gValues'>): Warning[] {
  const kept = levels.filter((level) => gS !== null && gValues === 'adopted' && level.g_j.basis !== 'coupled' && level.g_j.adopted !== null)
  if (kept.length === 0) return []
  return [{ code: 'g_s_not_applied', detail: `g_s does not touch the adopted g_J of ${kept.map((level) => level.id).join(' and ')}, which is not computed from it; g_values=coupled or ls takes all from g_s.` }]
}

/** The other levels of a term that the intermediate model mixes in, where their adopted g_J departs from LS. */
export function memberWarnings({ s, l, levels }: MembersTold, own: string): Warning[] {
  if (s === null || l === null) return []
  const numbers = { twoS: twice(s), l }
  return levels.flatMap((member) => (member.id === own || member.g_j === null ? [] : notPure(member.id, member.g_j, landeG({ ...numbers, twoJ: twice(member.j) }))))
}

/** What is to be known of the medium of a line. */
export function mediumWarnings(line: Pick<PredictedLine, 'wavelength_vac_nm'>, medium: ComponentsAsked['medium']): Warning[] {
  const warnings: Warning[] = []
  if (airWavelength(line.wavelength_vac_nm).extrapolated) warnings.push({ code: 'air_extrapolated', detail: AIR_EXTRAPOLATED })
  if (medium === 'air' && line.wavelength_vac_nm < AIR_FROM_NM) {
    warnings.push({ code: 'air_not_applicable', detail: 'Below 200 nm no air wavelength is given; shift_pm is in vacuum.' })
  }
  return warnings
}

/** Says what the stored constants A are beside the field's own splitting, for each end that has any. */
export function hyperfineWarnings({ lower, upper, hyperfine }: PredictedLine, fieldTesla: number, g: { lower: number | null; upper: number | null }): Warning[] {
  return (['lower', 'upper'] as const).flatMap((end) => {
    const level = end === 'lower' ? lower : upper
    const told = hyperfine[end].flatMap(({ mass_number, a_mhz }) => (a_mhz === null ? [] : [`A = ${a_mhz} MHz for mass number ${mass_number}`]))
    const splitting = g[end]
    if (told.length === 0 || splitting === null) return []
    const ghz = Math.abs(splitting) * MU_B_OVER_H_GHZ_PER_T * fieldTesla
    return [{
      code: 'hyperfine_ignored',
      detail: `Hyperfine structure is left out: ${level.id} has ${told.join(', ')}; at this field g mu_B B / h is ${Number(ghz.toPrecision(3))} GHz. Where the two are comparable the pattern is not what the isotope shows; hyperfine=true computes it.`,
    }]
  })
}

export const CROSSED: Warning = { code: 'level_crossing', detail: 'At this field an upper sublevel lies at or below a lower one; those components have no wavelength, and their wavenumber is not positive.' }
