import { jjG, type JjQuantumNumbers, landeG, type LsQuantumNumbers, pairG, type PairQuantumNumbers } from '@/lib/atomic/lande'
import { type JudgedLevel } from '@/lib/atomic/rules'
import type { Level } from '@/openapi/schemas/level'

/** The part of a level that physics looks at: levels of the table and levels given in a request alike. */
export type PhysicalLevel = Pick<Level, 'coupling' | 'term' | 'energy_invcm' | 'energy_unc_invcm' | 'g_j'>

/** Angular momenta leave the API as numbers and go into the physics as twice the value. */
export const twice = (value: number): number => Math.round(2 * value)

export const twoJOf = (level: Pick<Level, 'term'>): number => twice(level.term.j)

/** What selection rules look at. */
export const judgedOf = (level: Pick<Level, 'coupling' | 'term'>): JudgedLevel => ({
  twoJ: twoJOf(level),
  twoS: level.term.s === null ? null : twice(level.term.s),
  l: level.term.l,
  parity: level.term.parity,
  coupling: level.coupling,
})

/** S, L, J of a level named in LS coupling, else null. */
export function lsNumbers({ coupling, term }: Pick<Level, 'coupling' | 'term'>): LsQuantumNumbers | null {
  return coupling === 'LS' && term.s !== null && term.l !== null ? { twoS: twice(term.s), l: term.l, twoJ: twice(term.j) } : null
}

const coreNumbers = ({ core }: Level['term']): LsQuantumNumbers | null => (core ? { twoS: twice(core.s), l: core.l, twoJ: twice(core.j) } : null)

export function pairNumbers({ coupling, term }: Pick<Level, 'coupling' | 'term'>): PairQuantumNumbers | null {
  const core = coreNumbers(term)
  if (coupling !== 'J1K' || !core || term.l_outer === undefined || term.k === undefined) return null
  return { core, lOuter: term.l_outer, twoK: twice(term.k), twoJ: twice(term.j) }
}

export function jjNumbers({ coupling, term }: Pick<Level, 'coupling' | 'term'>): JjQuantumNumbers | null {
  const core = coreNumbers(term)
  if (coupling !== 'jj' || !core || term.l_outer === undefined || term.j_outer === undefined) return null
  return { core, lOuter: term.l_outer, twoJOuter: twice(term.j_outer), twoJ: twice(term.j) }
}

/** g_J in the level's own coupling with a g_s of choice; null for J = 0 and where the coupling is not told in full. */
export function coupledAt(level: Pick<Level, 'coupling' | 'term'>, gS: number): number | null {
  const ls = lsNumbers(level)
  if (ls) return landeG(ls, { gS })
  const pair = pairNumbers(level)
  if (pair) return pairG(pair, gS)
  const jj = jjNumbers(level)
  return jj ? jjG(jj, gS) : null
}
