import { G_S } from '@/lib/atomic/constants'
import { coupledRange } from '@/lib/atomic/half'
import { landeG, landeGExact } from '@/lib/atomic/lande'
import { printTerm, type Term } from '@/lib/atomic/term'
import type { DecodedTerm } from '@/openapi/schemas/computed'

/** J's that a symbol leaves open, as twice the value; the product of multiplicities where J is not given. */
function range(term: Term): { possible: number[]; states: number } {
  if (term.kind === 'LS') return { possible: coupledRange(term.twoS, 2 * term.l), states: (term.twoS + 1) * (2 * term.l + 1) }
  if (term.kind === 'J1K') return { possible: coupledRange(term.twoK, 1), states: 2 * (term.twoK + 1) }
  return { possible: coupledRange(term.twoJ1, term.twoJ2), states: (term.twoJ1 + 1) * (term.twoJ2 + 1) }
}

/**
 * A bare symbol decoded without the table. g_J is the LS one, real with `gS` and exact at g_s = 2: not applicable for J = 0 and
 * for a whole term; unknown for a pair or jj symbol, whose g needs the core that the symbol does not tell.
 */
export function decodeTerm(term: Term, gS: number = G_S): DecodedTerm {
  const { possible, states } = range(term)
  const { twoJ } = term
  const ls = term.kind === 'LS' ? { twoS: term.twoS, l: term.l } : null
  const hasG = twoJ !== null && twoJ > 0
  const g = ls && hasG ? { ls: landeG({ ...ls, twoJ }, { gS }), ls_exact: landeGExact({ ...ls, twoJ }) } : { ls: null, ls_exact: null }
  return {
    symbol: printTerm(term, 'ascii'),
    unicode: printTerm(term, 'unicode'),
    label: term.label,
    multiplicity: ls ? ls.twoS + 1 : null,
    s: ls ? ls.twoS / 2 : null,
    l: ls?.l ?? null,
    j: twoJ === null ? null : twoJ / 2,
    possible_j: possible.map((two) => two / 2),
    parity: term.parity,
    degeneracy: twoJ === null ? states : twoJ + 1,
    g_j: { ...g, status: !hasG ? 'not_applicable' : ls ? 'ok' : 'unknown' },
  }
}
