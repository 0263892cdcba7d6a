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

/**
 * What is wrong with the levels of one term, each by itself and all together: they share S, L and parity with the first, and each J stands once.
 * `pointerOf` is the place of a level in the body.
 */
export function termFaults(levels: readonly InlineLevelGiven[], pointerOf: (index: number) => string): Fault[] {
  const [first] = levels
  const seen = new Set<number>()
  return levels.flatMap((level, i): Fault[] => {
    const at = pointerOf(i)
    const faults = inlineFaults(level, at)
    for (const name of ['s', 'l', 'parity'] as const) {
      if (first && level[name] !== first[name]) {
        faults.push({ pointer: `${at}/${name}`, code: 'term_mixed', detail: `${name} is ${String(level[name])} here and ${String(first[name])} in the first level of the term; the levels of one term share S, L and parity.` })
      }
    }
    if (seen.has(level.j)) faults.push({ pointer: `${at}/j`, code: 'term_mixed', detail: `J = ${level.j} stands twice; each J of a term stands once.` })
    seen.add(level.j)
    return faults
  })
}

/** Places of a level and the others of its term, as lines of a request give them: `lower` and `lower_others`. */
export const besideOthers = (pointer: string) => (index: number): string => (index === 0 ? pointer : `${pointer}_others/${index - 1}`)

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
