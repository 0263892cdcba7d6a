import { adoptG } from '@/lib/atomic/adopted'
import { jjG, jjGExact, landeG, landeGExact, pairG, pairGExact } from '@/lib/atomic/lande'
import { couplingAt, type PackedLevels } from '@/lib/catalogue/columns'
import type { MeasuredGRow } from '@/lib/catalogue/shape'
import type { GJ } from '@/openapi/schemas/level'

/** g in the stated coupling: with the CODATA g_s, and exact at g_s = 2. Both null for J = 0 and for levels of no coupling. */
export interface CoupledG {
  readonly scheme: GJ['scheme']
  readonly value: number | null
  readonly exact: string | null
}

const NONE: CoupledG = { scheme: null, value: null, exact: null }

/** The same quantum numbers come back thousands of times in an edition: each is computed once in the life of the process. */
const memo = new Map<string, CoupledG>()
const MEMO_LIMIT = 20_000

function compute(packed: PackedLevels, i: number): CoupledG {
  const { columns } = packed
  const twoJ = columns.twoJ[i] ?? 0
  const coupling = couplingAt(packed.coupling[i] ?? 3)
  if (coupling === 'LS') {
    const numbers = { twoS: columns.twoS[i] ?? 0, l: columns.l[i] ?? 0, twoJ }
    return { scheme: 'LS', value: landeG(numbers), exact: landeGExact(numbers) }
  }
  const core = { twoS: packed.coreTwoS[i] ?? -1, l: packed.coreL[i] ?? -1, twoJ: packed.coreTwoJ[i] ?? -1 }
  const lOuter = packed.lOuter[i] ?? -1
  const unknownCore = core.twoS < 0 || core.l < 0 || lOuter < 0
  if (coupling === 'J1K') {
    const numbers = { core, lOuter, twoK: packed.twoK[i] ?? 0, twoJ }
    return unknownCore ? { ...NONE, scheme: 'J1K' } : { scheme: 'J1K', value: pairG(numbers), exact: pairGExact(numbers) }
  }
  if (coupling === 'jj') {
    const numbers = { core, lOuter, twoJOuter: packed.twoJOuter[i] ?? 0, twoJ }
    return unknownCore ? { ...NONE, scheme: 'jj' } : { scheme: 'jj', value: jjG(numbers), exact: jjGExact(numbers) }
  }
  return NONE
}

export function coupledG(packed: PackedLevels, i: number): CoupledG {
  const { columns } = packed
  const key = [packed.coupling[i], columns.twoJ[i], columns.twoS[i], columns.l[i], packed.twoK[i], packed.coreTwoS[i], packed.coreL[i], packed.coreTwoJ[i], packed.lOuter[i], packed.twoJOuter[i]].join(' ')
  const found = memo.get(key)
  if (found) return found
  if (memo.size >= MEMO_LIMIT) memo.clear()
  const made = compute(packed, i)
  memo.set(key, made)
  return made
}

const NO_ROWS: readonly MeasuredGRow[] = []

const adopt = (packed: PackedLevels, i: number, coupled: number | null) =>
  adoptG({ coupled, measured: packed.measured.get(i) ?? NO_ROWS, curator: packed.chosenG.get(i) ?? null })

/** The adopted value alone, NaN where there is none: for the column. */
export function adoptedNumber(packed: PackedLevels, i: number): number {
  if (packed.columns.twoJ[i] === 0) return Number.NaN
  const coupled = coupledG(packed, i).value
  if (!packed.measured.has(i) && !packed.chosenG.has(i)) return coupled ?? Number.NaN
  return adopt(packed, i, coupled).adopted ?? Number.NaN
}

/** Everything the API says about a level's g_J. */
export function gOf(packed: PackedLevels, i: number, coupled: CoupledG): GJ {
  const noG = packed.columns.twoJ[i] === 0
  const rows = packed.measured.get(i) ?? NO_ROWS
  const { adopted, basis, chosen, byCurator } = adopt(packed, i, coupled.value)
  const isLs = coupled.scheme === 'LS'
  return {
    adopted: noG ? null : adopted,
    adopted_unc: basis === 'measured' && !byCurator ? (chosen?.unc ?? null) : null,
    basis: noG ? 'none' : byCurator ? 'chosen' : basis,
    scheme: coupled.scheme,
    coupled: coupled.value,
    coupled_exact: coupled.exact,
    ls: isLs ? coupled.value : null,
    ls_exact: isLs ? coupled.exact : null,
    measured: chosen?.value ?? null,
    measured_unc: chosen?.unc ?? null,
    measured_source: chosen?.source ?? null,
    measured_evidence: chosen?.evidence ?? null,
    all_measured: rows.map(({ value, unc, source, evidence, note }) => ({ value, unc, source, evidence, note })),
    status: noG ? 'not_applicable' : adopted === null ? 'unknown' : 'ok',
  }
}
