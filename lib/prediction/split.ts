import { type Component as WeakComponent, type Polarisation, weakFieldComponents } from '@/lib/atomic/components'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { type FieldMultiplet, multipletOfTerms } from '@/lib/atomic/field-multiplet'
import type { TermState } from '@/lib/atomic/intermediate'
import { type IntermediateComponent, intermediateLine } from '@/lib/atomic/intermediate-lines'
import { intermediateUncertainty } from '@/lib/atomic/intermediate-uncertainty'
import type { TermLevels } from '@/lib/atomic/mixing'
import type { ComponentRule } from '@/lib/atomic/rules'
import type { ComponentsAsked, PredictedLine } from '@/lib/prediction/components'
import type { ChosenG } from '@/lib/prediction/g-values'
import { twoJOf } from '@/lib/prediction/levels'
import { uncertainLevels } from '@/lib/prediction/term-levels'
import { componentUncertainty, toldUncertainty, type UncertaintyTold } from '@/lib/prediction/uncertainty'

/** One end of a component: the sublevel, and in the intermediate model its state. */
interface SplitEnd {
  twoJ: number | null
  twoM: number
  state: TermState | null
}

/** A component before it is put on its scales. */
export interface Split {
  lower: SplitEnd
  upper: SplitEnd
  q: number
  polarisation: Polarisation
  shiftLorentz: number | null
  shiftInvcm: number
  derivativeInvcmPerTesla: number
  strength: number | null
  intensity: number | null
  stokesQ: number | null
  stokesV: number | null
  vanishesBy: ComponentRule | null
  uncertainty: UncertaintyTold
}

/** A line with the g in force at both ends. */
export interface UsedLine {
  line: PredictedLine
  lower: ChosenG
  upper: ChosenG
}

/** The components in the linear model, sorted by q, shift, m_lower. */
export function linearSplits({ line, lower, upper }: UsedLine, { fieldTesla, fieldUncTesla, thetaDeg }: ComponentsAsked): Split[] {
  const [low, high] = [{ twoJ: twoJOf(line.lower), g: lower.g }, { twoJ: twoJOf(line.upper), g: upper.g }]
  return weakFieldComponents({ kind: line.kind, lower: low, upper: high, fieldTesla, thetaDeg }).map((split: WeakComponent): Split => {
    const { twoMLower, twoMUpper } = split
    return {
      ...split,
      lower: { twoJ: low.twoJ, twoM: twoMLower, state: null },
      upper: { twoJ: high.twoJ, twoM: twoMUpper, state: null },
      derivativeInvcmPerTesla: MU_B_OVER_HC_INVCM_PER_T * split.shiftLorentz,
      vanishesBy: split.forbidden ?? null,
      uncertainty: componentUncertainty({ level: line.lower, chosen: lower, twoM: twoMLower }, { level: line.upper, chosen: upper, twoM: twoMUpper }, fieldTesla, fieldUncTesla),
    }
  })
}

/** The multiplet of a line between two whole terms, with the g_s asked for; remembered. */
export const multipletOf = (line: Pick<PredictedLine, 'kind'>, terms: { lower: TermLevels; upper: TermLevels }, gS: number | null): FieldMultiplet =>
  multipletOfTerms(terms.lower, terms.upper, line.kind, { gS: gS ?? G_S, gL: 1 })

/** The components in the intermediate model, sorted by q, shift, m_lower; J of both ends by continuity from zero field. */
export function intermediateSplits({ line, lower, upper }: UsedLine, multiplet: FieldMultiplet, asked: ComponentsAsked): Split[] {
  const { fieldTesla, fieldUncTesla: fieldUnc, thetaDeg } = asked
  const [twoJLower, twoJUpper] = [twoJOf(line.lower), twoJOf(line.upper)]
  const [lowerLevels, upperLevels] = [uncertainLevels(line.terms.lower, asked, { twoJ: twoJLower, gUnc: lower.unc }), uncertainLevels(line.terms.upper, asked, { twoJ: twoJUpper, gUnc: upper.unc })]
  return intermediateLine(multiplet, { twoJLower, twoJUpper }, fieldTesla, thetaDeg).map((one: IntermediateComponent): Split => ({
    ...one,
    lower: { twoJ: one.lower.twoJ, twoM: one.lower.twoM, state: one.lower },
    upper: { twoJ: one.upper.twoJ, twoM: one.upper.twoM, state: one.upper },
    vanishesBy: null,
    uncertainty: toldUncertainty(intermediateUncertainty({ lower: { state: one.lower, levels: lowerLevels }, upper: { state: one.upper, levels: upperLevels }, fieldTesla, fieldUnc })),
  }))
}
