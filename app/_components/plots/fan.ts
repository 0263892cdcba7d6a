import { GHZ_PER_INVCM, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { solveTerm, termSolution } from '@/lib/atomic/field-solver'
import type { FieldTerm } from '@/lib/atomic/field-term'
import { formatHalfUnicode, magneticNumbers, type TwoJ } from '@/lib/atomic/half'
import { type HyperfineReady, hyperfineSublevels } from '@/lib/atomic/hyperfine'
import { hyperfineGrid } from '@/lib/atomic/hyperfine-grid'

/** One sublevel against the field. */
export interface FanCurve {
  key: string
  /** m, or F and m_F. */
  name: string
  /** What it tends to at high field: M_L and M_S, or m_J and m_I; null where the model names none. */
  far: string | null
  /** Energy at each field, cm^-1, from the level without field and nuclear spin. */
  values: Float64Array
  /** cm^-1 per tesla of the linear law, drawn dashed beside the curve; null where the curve is that law, or none is drawn. */
  linear: number | null
}

/** The sublevels of a level between zero field and an edge. */
export interface Fan {
  fieldsTesla: Float64Array
  curves: FanCurve[]
  /** Sublevels of the other J of the term, which push these; they have no labels. */
  neighbours: { key: string; twoJ: TwoJ; values: Float64Array }[]
  /** What the names at the right edge are of. */
  heads: { name: string; far: string | null }
}

/** A sublevel at the field in force. */
export interface FanPoint {
  key: string
  name: string
  far: string | null
  /** From the same zero as the curves, cm^-1. */
  energyInvcm: number
  /** From its own level at zero field, cm^-1. */
  shiftInvcm: number
}

const NODES = 72
/** Fields closer together near zero, where hyperfine and fine structure bend within a small part of the sheet. */
export const fanFields = (edgeTesla: number): Float64Array => Float64Array.from({ length: NODES + 1 }, (_, i) => edgeTesla * (i / NODES) ** 2)

export const pairText = (one: TwoJ, other: TwoJ): string => `${formatHalfUnicode(one)}, ${formatHalfUnicode(other)}`
const MHZ_PER_INVCM = GHZ_PER_INVCM * 1000
const HEADS = { linear: { name: 'm', far: null }, term: { name: 'm', far: 'M_L, M_S' }, nucleus: { name: 'F, m_F', far: 'm_J, m_I' } } as const

/** The linear law: straight lines. */
export function linearFan(twoJ: TwoJ, g: number | null, edgeTesla: number): Fan {
  const curves = magneticNumbers(twoJ).map((twoM): FanCurve => {
    const slope = (MU_B_OVER_HC_INVCM_PER_T * (g ?? 0) * twoM) / 2
    return { key: String(twoM), name: formatHalfUnicode(twoM), far: null, values: Float64Array.of(0, slope * edgeTesla), linear: null }
  })
  return { fieldsTesla: Float64Array.of(0, edgeTesla), curves, neighbours: [], heads: HEADS.linear }
}

/** The sublevels of one J of a term, diagonalised at every field, the linear law beside them, and the neighbours of the term. */
export function termFan(term: FieldTerm, twoJ: TwoJ, edgeTesla: number): Fan {
  const fieldsTesla = fanFields(edgeTesla)
  const solution = termSolution(term)
  const own = term.levels.find((level) => level.twoJ === twoJ)
  const states = term.blocks.flatMap((block) =>
    [...block.own].map((index, k) => {
      const nominal = block.twoJs[index] ?? 0
      const level = term.levels.find((one) => one.twoJ === nominal)
      return { twoM: block.twoM, twoJ: nominal, pair: block.pairs[k], offset: (level?.energyInvcm ?? 0) - (own?.energyInvcm ?? 0), at: block.firstState + k, slope: block.slopes[index] ?? 0, values: new Float64Array(fieldsTesla.length) }
    }),
  )
  fieldsTesla.forEach((field, row) => {
    solveTerm(term, MU_B_OVER_HC_INVCM_PER_T * field, solution)
    for (const state of states) state.values[row] = state.offset + (solution.shifts[state.at] ?? 0)
  })
  const bends = term.levels.length > 1
  return {
    fieldsTesla,
    curves: states.filter((state) => state.twoJ === twoJ).map(({ twoM, pair, values, slope }) => ({
      key: String(twoM),
      name: formatHalfUnicode(twoM),
      far: pair ? pairText(2 * pair.mL, pair.twoMS) : null,
      values,
      linear: bends ? MU_B_OVER_HC_INVCM_PER_T * slope : null,
    })),
    neighbours: states.filter((state) => state.twoJ !== twoJ).map(({ twoJ: other, twoM, values }) => ({ key: `${other}:${twoM}`, twoJ: other, values })),
    heads: HEADS.term,
  }
}

/** The hyperfine sublevels of a level, from its centre of gravity. */
export function hyperfineFan(ready: HyperfineReady, edgeTesla: number): Fan {
  const fieldsTesla = fanFields(edgeTesla)
  const { states, energiesMhz } = hyperfineGrid(ready, fieldsTesla)
  const curves = hyperfineSublevels(ready, 0).map((state, at): FanCurve => ({
    key: `${state.twoMJ}:${state.twoMI}`,
    name: state.twoF === null ? formatHalfUnicode(state.twoMF) : pairText(state.twoF, state.twoMF),
    far: pairText(state.twoMJ, state.twoMI),
    values: fieldsTesla.map((_, row) => (energiesMhz[row * states + at] ?? 0) / MHZ_PER_INVCM),
    linear: null,
  }))
  return { fieldsTesla, curves, neighbours: [], heads: HEADS.nucleus }
}
