import { type JjTerm, type LsTerm, type PairTerm, printTerm, type Term as AtomicTerm } from '@/lib/atomic/term'
import { formatHalf, half } from '@/lib/atomic/half'
import { couplingAt, evidenceAt, type PackedLevels } from '@/lib/catalogue/columns'
import { coupledG, gOf } from '@/lib/catalogue/g-value'
import type { Level, Term } from '@/openapi/schemas/level'

const known = (value: number): number | null => (value < 0 ? null : value)

/** The symbol's parts in the form that prints it; null for a level that no coupling names. */
function atomicTerm(packed: PackedLevels, i: number): AtomicTerm | null {
  const { columns } = packed
  const twoJ = columns.twoJ[i] ?? 0
  const parity = columns.parity[i] === 1 ? ('odd' as const) : ('even' as const)
  const coupling = couplingAt(packed.coupling[i] ?? 3)
  if (coupling === 'LS') {
    const twoS = columns.twoS[i] ?? 0
    return { kind: 'LS', multiplicity: twoS + 1, twoS, l: columns.l[i] ?? 0, parity, label: null, twoJ } satisfies LsTerm
  }
  if (coupling === 'J1K') return { kind: 'J1K', twoK: packed.twoK[i] ?? 0, twoJ, parity, label: null } satisfies PairTerm
  if (coupling === 'jj') return { kind: 'jj', twoJ1: packed.coreTwoJ[i] ?? 0, twoJ2: packed.twoJOuter[i] ?? 0, twoJ, parity, label: null } satisfies JjTerm
  return null
}

function termOf(packed: PackedLevels, i: number): Term {
  const { columns } = packed
  const term = atomicTerm(packed, i)
  const twoJ = columns.twoJ[i] ?? 0
  const odd = columns.parity[i] === 1
  const isLs = columns.lsNamed[i] === 1
  const [coreTwoS, coreL, coreTwoJ, lOuter] = [known(packed.coreTwoS[i] ?? -1), known(packed.coreL[i] ?? -1), known(packed.coreTwoJ[i] ?? -1), known(packed.lOuter[i] ?? -1)]
  const labelNumber = packed.label[i] ?? -1
  return {
    // a level of no coupling has J and parity only
    symbol: term === null ? `J=${formatHalf(twoJ)}${odd ? '*' : ''}` : printTerm(term, 'ascii'),
    unicode: term === null ? `J=${formatHalf(twoJ)}${odd ? '°' : ''}` : printTerm(term, 'unicode'),
    label: labelNumber < 0 ? null : packed.texts.text(labelNumber),
    multiplicity: isLs ? (columns.twoS[i] ?? 0) + 1 : null,
    s: isLs ? half(columns.twoS[i] ?? 0) : null,
    l: isLs ? (columns.l[i] ?? 0) : null,
    j: half(twoJ),
    parity: odd ? 'odd' : 'even',
    degeneracy: twoJ + 1,
    ...(term?.kind === 'J1K' ? { k: half(term.twoK) } : {}),
    ...(coreTwoS !== null && coreL !== null && coreTwoJ !== null ? { core: { s: half(coreTwoS), l: coreL, j: half(coreTwoJ) } } : {}),
    ...(lOuter === null ? {} : { l_outer: lOuter }),
    ...(term?.kind === 'jj' ? { j_outer: half(term.twoJ2) } : {}),
  }
}

/** Builds the API's form of one level. `id` and `species` come from the snapshot, which knows the species. */
export function buildLevel(packed: PackedLevels, i: number, id: string, species: string): Level {
  const unc = packed.energyUncInvcm[i] ?? Number.NaN
  return {
    id,
    species,
    configuration: packed.texts.text(packed.configuration[i] ?? 0),
    coupling: couplingAt(packed.coupling[i] ?? 3),
    term: termOf(packed, i),
    energy_invcm: packed.columns.energyInvcm[i] ?? 0,
    energy_unc_invcm: Number.isNaN(unc) ? null : unc,
    energy_literal: packed.energyLiteral.get(i) ?? null,
    g_j: gOf(packed, i, coupledG(packed, i)),
    energy_source: packed.texts.text(packed.energySource[i] ?? 0),
    energy_evidence: evidenceAt(packed.energyEvidence[i] ?? 2),
    line_checked: packed.lineChecked[i] === 1,
    repeat_index: known(packed.repeatIndex[i] ?? -1),
    alternative_name: packed.alternativeName.get(i) ?? null,
    note: packed.note.get(i) ?? null,
    status: packed.retired.has(i) ? 'retired' : 'active',
    revision: packed.revision[i] ?? 1,
  }
}
