import { landeG, landeGExact } from '@/lib/atomic/lande'
import { checkLsJ, lsTerm, printTerm } from '@/lib/atomic/term'
import type { Fault } from '@/lib/problem'
import { twice } from '@/lib/prediction/levels'
import type { InlineLevelAnswer } from '@/openapi/schemas/transition'

/** A level of no table, given in a request. */
export interface InlineLevelGiven {
  energy_invcm: number
  s: number
  l: number
  j: number
  parity: 'even' | 'odd'
  g_j?: number | null
  label?: string | null
}

/** What is physically wrong with an inline level; `pointer` is its place in the body. */
export function inlineFaults(level: InlineLevelGiven, pointer: string): Fault[] {
  const wrong = checkLsJ({ twoS: twice(level.s), l: level.l }, twice(level.j))
  const faults: Fault[] = wrong ? [{ pointer: `${pointer}/j`, code: wrong.code, detail: wrong.detail }] : []
  if (level.j === 0 && level.g_j !== undefined && level.g_j !== null) {
    faults.push({ pointer: `${pointer}/g_j`, code: 'g_impossible', detail: 'A level of J = 0 has no g_J, since it has no sublevels to split; leave g_j out.' })
  }
  return faults
}

/** The level decoded, in LS coupling. A g_j given is the adopted one; without it the LS value is. What only a table knows is null. */
export function inlineLevel(given: InlineLevelGiven, gS: number | null): InlineLevelAnswer {
  const numbers = { twoS: twice(given.s), l: given.l, twoJ: twice(given.j) }
  const term = lsTerm(numbers.twoS, numbers.l, numbers.twoJ, given.parity, given.label ?? null)
  const ls = gS === null ? landeG(numbers) : landeG(numbers, { gS })
  const exact = landeGExact(numbers)
  const chosen = given.g_j ?? null
  return {
    id: null,
    species: null,
    configuration: null,
    coupling: 'LS',
    term: {
      symbol: printTerm(term, 'ascii'),
      unicode: printTerm(term, 'unicode'),
      label: given.label ?? null,
      multiplicity: numbers.twoS + 1,
      s: given.s,
      l: given.l,
      j: given.j,
      parity: given.parity,
      degeneracy: numbers.twoJ + 1,
    },
    energy_invcm: given.energy_invcm,
    energy_unc_invcm: null,
    energy_literal: null,
    g_j: {
      adopted: chosen ?? ls,
      adopted_unc: null,
      basis: chosen !== null ? 'chosen' : ls === null ? 'none' : 'coupled',
      scheme: 'LS',
      coupled: ls,
      coupled_exact: exact,
      ls,
      ls_exact: exact,
      measured: null,
      measured_unc: null,
      measured_source: null,
      measured_evidence: null,
      all_measured: [],
      status: numbers.twoJ === 0 ? 'not_applicable' : 'ok',
    },
    energy_source: null,
    energy_evidence: null,
    line_checked: false,
    repeat_index: null,
    alternative_name: null,
    note: null,
    status: 'active',
    revision: null,
  }
}
