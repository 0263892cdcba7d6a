import { hyperfineLevel, hyperfineSublevels } from '@/lib/atomic/hyperfine'
import { hyperfineGrid } from '@/lib/atomic/hyperfine-grid'
import { type Fault, faultsProblem } from '@/lib/problem'
import type { Warning } from '@/lib/prediction/component-warnings'
import { twice } from '@/lib/prediction/levels'
import { checkSize, type FieldsGiven, readFields, rowsOf } from '@/lib/prediction/sublevels'
import type { HyperfineMatrix } from '@/openapi/schemas/computed'

export interface NuclearSublevelsAsked {
  level: { j: number; g_j?: number | null | undefined }
  nucleus: { i: number; a_mhz: number; b_mhz?: number | null | undefined; g_i?: number | null | undefined }
  field: FieldsGiven
}

function faultsOf({ level }: NuclearSublevelsAsked): Fault[] {
  const g = level.g_j ?? null
  if (level.j > 0 && g === null) return [{ pointer: '/level/g_j', code: 'g_unknown', detail: 'A level of J above 0 splits by its g_J: give it.' }]
  if (level.j === 0 && g !== null) return [{ pointer: '/level/g_j', code: 'g_impossible', detail: 'A level of J = 0 has no g_J, since it has no sublevels to split; leave g_j out.' }]
  return []
}

/** How many pairs of m_J and m_I have each m_F. */
const blocksOf = (twoJ: number, twoI: number): number[] => Array.from({ length: twoJ + twoI + 1 }, (_, k) => Math.min(k, twoJ + twoI - k, twoJ, twoI) + 1)

/**
 * Hyperfine sublevels of one level over fields: states by m_F, then upwards; shifts from F at zero field and energies from the centre of gravity of J
 * in MHz, derivatives in MHz per tesla. Refuses `g_unknown`, `g_impossible`, `answer_too_large`.
 */
export function nuclearSublevels(asked: NuclearSublevelsAsked): { matrix: HyperfineMatrix; warnings: Warning[] } {
  const faults = faultsOf(asked)
  if (faults.length > 0) throw faultsProblem(faults)
  const fields = readFields(asked.field)
  const { level, nucleus } = asked
  checkSize((twice(level.j) + 1) * (twice(nucleus.i) + 1), fields.length, 3, blocksOf(twice(level.j), twice(nucleus.i)))
  const ready = hyperfineLevel({ twoJ: twice(level.j), gJ: level.g_j ?? null, twoI: twice(nucleus.i), aMhz: nucleus.a_mhz, bMhz: nucleus.b_mhz ?? null, gI: nucleus.g_i ?? null })
  const names = hyperfineSublevels(ready, 0)
  const { states, energiesMhz, derivatives } = hyperfineGrid(ready, fields)
  const energies = rowsOf(energiesMhz, fields.length, states)
  const origins = ready.blocks.flatMap((block) => block.fs.map((f) => f.energyMhz))
  const matrix: HyperfineMatrix = {
    f: names.map((state) => (state.twoF === null ? null : state.twoF / 2)),
    m_f: names.map((state) => state.twoMF / 2),
    m_j: names.map((state) => state.twoMJ / 2),
    m_i: names.map((state) => state.twoMI / 2),
    shifts_mhz: energies.map((row, at) => row.map((energy, state) => (fields[at] === 0 ? 0 : energy - (origins[state] ?? 0)))),
    energies_mhz: energies,
    derivatives: rowsOf(derivatives, fields.length, states),
  }
  const warnings: Warning[] = nucleus.i > 0 && (nucleus.g_i ?? null) === null ? [{ code: 'g_i_unknown', detail: "g_I' of the nucleus is not given and taken as 0: its own moment in the field is left out." }] : []
  return { matrix, warnings }
}
