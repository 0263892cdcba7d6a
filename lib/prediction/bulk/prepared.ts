import { angularFactors, componentStrength, shiftLorentz } from '@/lib/atomic/components'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { type FieldMultiplet, lineNormalisation, lineShare, multipletOfTerms, whyNoAmplitude } from '@/lib/atomic/field-multiplet'
import type { FieldBlock } from '@/lib/atomic/field-term'
import type { FieldModel } from '@/lib/atomic/intermediate-validity'
import { rankOf } from '@/lib/atomic/rules'
import type { BlockGiven, PredictionOptions } from '@/lib/prediction/bulk/block'
import { canJoin, type Place, placesOf } from '@/lib/prediction/bulk/places'
import { type Decision, decideSteps } from '@/lib/prediction/bulk/validity'

/** Straight lines over the field, and strengths that do not depend on it. */
export interface LinearBlock {
  /** By component, cm^-1 per tesla. */
  slopes: Float64Array
  strengths: Float64Array | null
}

/** The part of a diagonalised multiplet that a block shows. */
export interface DiagonalisedBlock {
  multiplet: FieldMultiplet
  /** Index within the multiplet of each component. */
  components: Int32Array
  /** Of a strength of the multiplet to the strength told; null where there is none. */
  factor: number | null
  /** The m blocks that these components need. */
  needed: ReadonlySet<FieldBlock>
}

/** A block with all that does not depend on the field. */
export interface ModelledBlock {
  model: FieldModel
  transition: string | null
  normalisation: 'line' | 'multiplet'
  places: Place[]
  /** J by continuity; null where zero-field energies coincide. */
  jLower: (number | null)[]
  jUpper: (number | null)[]
  /** By component: the line without field, cm^-1. */
  centres: Float64Array
  linear: LinearBlock | null
  diagonalised: DiagonalisedBlock | null
  /** By component: intensity over strength at the angle asked; null where none is asked or it is not known (E2). */
  angular: Float64Array | null
}

/** The same with how well the linear law holds. */
export type PreparedBlock = ModelledBlock & Decision

interface Facts { energyInvcm: number; g: number | null }

/** Energy and g of a block's levels by J. */
function levelsOf(block: BlockGiven): { lower: Map<number, Facts>; upper: Map<number, Facts> } {
  if (block.form === 'line') return { lower: new Map([[block.lower.twoJ, block.lower]]), upper: new Map([[block.upper.twoJ, block.upper]]) }
  const byJ = (levels: { twoJ: number; energyInvcm: number; g: number | null }[]) => new Map(levels.map((level) => [level.twoJ, level]))
  return { lower: byJ(block.lower.levels), upper: byJ(block.upper.levels) }
}

/** Strengths in the linear law: of a line each q sums to 1; of a multiplet every line has its share, a third of it in each q. */
function linearStrengths(block: BlockGiven, places: readonly Place[]): Float64Array | null {
  const { kind } = block
  const strength = (place: Place) => (canJoin(kind, place.twoJLower, place.twoJUpper) ? componentStrength(kind, place.twoJLower, place.twoMLower, place.twoJUpper, place.twoMUpper) : 0)
  if (block.form === 'line') return Float64Array.from(places, strength)
  const noAmplitude = whyNoAmplitude(kind, block.lower, block.upper)
  if (noAmplitude !== null) return null
  const terms = { lower: block.lower, upper: block.upper, noAmplitude }
  return Float64Array.from(places, (place) => (lineShare(terms, place.twoJLower, place.twoJUpper) * strength(place)) / 3)
}

function linearOf(block: BlockGiven, places: readonly Place[]): LinearBlock {
  const { lower, upper } = levelsOf(block)
  const slope = (place: Place) => MU_B_OVER_HC_INVCM_PER_T * shiftLorentz(lower.get(place.twoJLower)?.g ?? null, place.twoMLower, upper.get(place.twoJUpper)?.g ?? null, place.twoMUpper)
  return { slopes: Float64Array.from(places, slope), strengths: linearStrengths(block, places) }
}

function diagonalisedOf(block: BlockGiven, gS: number | null): DiagonalisedBlock {
  const [lower, upper] = block.form === 'line' ? [block.lower.term, block.upper.term] : [block.lower, block.upper]
  if (lower === null || upper === null) throw new RangeError('a level without S and L cannot be diagonalised')
  // with g_L named as the validity names it, which has made the same multiplet before
  const multiplet = multipletOfTerms(lower, upper, block.kind, { gS: gS ?? G_S, gL: 1 })
  const all = Array.from({ length: multiplet.count }, (_, i) => i)
  const own = block.form === 'multiplet' ? all : all.filter((i) => multiplet.nominalTwoJLower[i] === block.lower.twoJ && multiplet.nominalTwoJUpper[i] === block.upper.twoJ)
  const links = own.map((i) => multiplet.links[multiplet.linkOf[i] ?? 0]).filter((link) => link !== undefined)
  const needed = new Set(links.flatMap((link) => [link.lower, link.upper]))
  const normalisation = block.form === 'multiplet' ? 1 : lineNormalisation(multiplet, block.lower.twoJ, block.upper.twoJ)
  return { multiplet, components: Int32Array.from(own), factor: multiplet.noAmplitude === null ? normalisation : null, needed }
}

/** Intensity over strength by component; of a multiplet, whose q sum to a third each, three times that of a line. */
function angularOf(block: BlockGiven, places: readonly Place[], thetaDeg: number | null): Float64Array | null {
  if (thetaDeg === null) return null
  const rank = rankOf(block.kind)
  const byQ = Array.from({ length: 2 * rank + 1 }, (_, i) => angularFactors(block.kind, i - rank, thetaDeg).intensity)
  if (byQ.some((factor) => factor === null)) return null
  return Float64Array.from(places, (place) => (byQ[place.q + rank] ?? 0) * (block.form === 'multiplet' ? 3 : 1))
}

/** Makes a block ready in a model. */
export function modelledBlock(block: BlockGiven, model: FieldModel, options: Pick<PredictionOptions, 'gS' | 'thetaDeg'>): ModelledBlock {
  const places = placesOf(block)
  const { lower, upper } = levelsOf(block)
  const intermediate = model === 'intermediate'
  const diagonalised = intermediate ? diagonalisedOf(block, options.gS) : null
  const names = (two: (number | null)[] | undefined, nominal: (place: Place) => number) =>
    diagonalised === null || two === undefined ? places.map((place) => nominal(place) / 2) : [...diagonalised.components].map((i) => halved(two[i] ?? null))
  return {
    model,
    transition: block.transition,
    normalisation: block.form,
    places,
    jLower: names(diagonalised?.multiplet.twoJLower, (place) => place.twoJLower),
    jUpper: names(diagonalised?.multiplet.twoJUpper, (place) => place.twoJUpper),
    centres: Float64Array.from(places, (place) => (upper.get(place.twoJUpper)?.energyInvcm ?? 0) - (lower.get(place.twoJLower)?.energyInvcm ?? 0)),
    linear: intermediate ? null : linearOf(block, places),
    diagonalised,
    angular: angularOf(block, places, options.thetaDeg),
  }
}

/** Decides a block's model from the largest field and makes it ready; a step for each line that is judged. */
export function* prepareSteps(block: BlockGiven, fieldTesla: number, options: PredictionOptions): Generator<null, PreparedBlock> {
  const decision = yield* decideSteps(block, fieldTesla, options)
  return { ...modelledBlock(block, decision.model, options), ...decision }
}

const halved = (two: number | null): number | null => (two === null ? null : two / 2)

/** Whether strengths can be told of a block. */
export const hasStrengths = ({ linear, diagonalised }: ModelledBlock): boolean => (linear !== null ? linear.strengths !== null : diagonalised?.factor !== null)
