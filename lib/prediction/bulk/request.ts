import { AIR_FROM_NM, AIR_MEASURED_TO_NM } from '@/lib/atomic/air'
import { PhysicsError } from '@/lib/atomic/errors'
import { impureJ } from '@/lib/atomic/field-term'
import { formatHalf } from '@/lib/atomic/half'
import { hasLsDipole } from '@/lib/atomic/term-coupling'
import type { Snapshot } from '@/lib/catalogue/shape'
import { type Fault, faultsProblem, Problem } from '@/lib/problem'
import { type BlockGiven, fieldCount, type FieldGiven, type PredictionOptions } from '@/lib/prediction/bulk/block'
import { readField } from '@/lib/prediction/bulk/field'
import { BlockMaker } from '@/lib/prediction/bulk/levels'
import { componentCount, linePairs } from '@/lib/prediction/bulk/places'
import { canDiagonalise } from '@/lib/prediction/bulk/validity'
import { GIVEN_MULTIPLET_MOST, givenMultipletFault } from '@/lib/prediction/term-work'
import { vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { predict } from '@/openapi/operations/predictions'
import type { z } from 'zod'

/** Fields times components of one request. */
export const MOST_VALUES = 5_000_000
/** Blocks read before the process looks after others. */
const READ_AT_ONCE = 100

export type PredictionsAsked = z.output<NonNullable<(typeof predict)['body']>>

export interface PredictionPlan {
  blocks: BlockGiven[]
  field: FieldGiven
  fieldText: string
  options: PredictionOptions
  /** Fields times components. */
  values: number
  /** Lines whose validity has to be found. */
  lines: number
  warnings: { code: string; detail: string }[]
}

const tooLarge = (values: number) =>
  new Problem('answer_too_large', `${values} values are asked for (fields times components); one request may ask for up to ${MOST_VALUES}. Ask for fewer lines or fields at once.`, { extra: { limit: MOST_VALUES } })

const others = () => new Promise<void>((resolve) => setImmediate(resolve))

/** The faults of what a refusal says, at their place in the body. */
export function faultsAt(error: unknown, at: string): Fault[] {
  if (error instanceof PhysicsError) return [{ pointer: error.field === 'g_values' ? '/g_values' : at, code: error.code, detail: error.detail }]
  if (!(error instanceof Problem)) throw error
  if (error.errors.length === 0) return [{ pointer: at, code: error.code, detail: error.detail }]
  return error.errors.map(({ pointer, code, detail }) => ({ pointer: pointer ?? at, code, detail }))
}

function optionsOf(body: PredictionsAsked): PredictionOptions {
  return { model: body.model, gS: body.g_s ?? null, thetaDeg: body.theta_deg ?? null, derivatives: body.derivatives, strengths: body.strengths, quantity: body.quantity, tolerance: body.tolerance }
}

/** Names up to five of the blocks that something holds for. */
function told(blocks: readonly BlockGiven[], all: readonly BlockGiven[]): string {
  const names = blocks.slice(0, 5).map((block) => block.transition ?? `block ${all.indexOf(block)}`)
  return `${names.join(', ')}${blocks.length > 5 ? ` and ${blocks.length - 5} more` : ''}`
}

const termsOf = (block: BlockGiven) => (block.form === 'line' ? ([block.lower.term, block.upper.term] as const) : ([block.lower, block.upper] as const))

function warningsOf(blocks: readonly BlockGiven[], { model, strengths, quantity, gS }: PredictionOptions, exchanged: number): PredictionPlan['warnings'] {
  const warnings: PredictionPlan['warnings'] = []
  const warn = (code: string, found: readonly BlockGiven[], say: (names: string) => string) => void (found.length > 0 && warnings.push({ code, detail: say(told(found, blocks)) }))
  if (exchanged > 0) warnings.push({ code: 'levels_exchanged', detail: `In ${exchanged} of the blocks given inline what is given as upper has the lower energy; lower and upper were exchanged in the answer.` })
  if (model === 'auto') warn('term_incomplete', blocks.filter((block) => !canDiagonalise(block)), (names) => `A term is not whole or not known, so model=auto stays linear, and its validity is not known: ${names}.`)
  if (model !== 'linear' && strengths) {
    const without = blocks.filter((block) => {
      const [lower, upper] = termsOf(block)
      return lower !== null && upper !== null && lower.levels.length + upper.levels.length > 2 && (block.kind !== 'E1' || !hasLsDipole(lower, upper))
    })
    warn('no_ls_amplitude', without, (names) => `The terms have no LS amplitude between them, so strengths are null where the block is in the intermediate model: ${names}.`)
  }
  if (model !== 'linear') {
    const impure = blocks.filter((block) => termsOf(block).some((term) => term !== null && impureJ(term, gS === null ? {} : { gS }).length > 0))
    warn('term_not_pure', impure, (names) => `A g_J in force is more than 0.5 % from its LS value, so the term is not pure: ${names}.`)
  }
  if (quantity === 'wavelength_air_nm') {
    const vacuum = (block: BlockGiven) => vacuumNmOfWavenumber(centreOf(block))
    warn('air_not_applicable', blocks.filter((block) => vacuum(block) < AIR_FROM_NM), (names) => `Below ${AIR_FROM_NM} nm no air wavelength is given; values are null there: ${names}.`)
    warn('air_extrapolated', blocks.filter((block) => vacuum(block) > AIR_MEASURED_TO_NM), (names) => `Beyond ${AIR_MEASURED_TO_NM} nm the formula of air is extrapolated: ${names}.`)
  }
  return warnings
}

/** Wavenumber of a line, or between the means of two terms. */
function centreOf(block: BlockGiven): number {
  if (block.form === 'line') return block.upper.energyInvcm - block.lower.energyInvcm
  const mean = (levels: { energyInvcm: number }[]) => levels.reduce((sum, level) => sum + level.energyInvcm, 0) / levels.length
  return mean(block.upper.levels) - mean(block.lower.levels)
}

/** What the intermediate model cannot do of a block. */
export function modelFaults(block: BlockGiven, at: string): Fault[] {
  if (canDiagonalise(block)) return []
  const [lower, upper] = termsOf(block)
  const why = (name: string, term: (typeof lower)): string | null => {
    if (term === null) return `the ${name} level has no S and L`
    const missing = missingOf(term)
    return missing.length === 0 ? null : `the ${name} term lacks J = ${missing.map(formatHalf).join(', ')}`
  }
  const reasons = [why('lower', lower), why('upper', upper)].filter((reason) => reason !== null)
  return [{ pointer: at, code: 'term_incomplete', detail: `The intermediate model needs all levels of both terms: ${reasons.join(', and ')}. Use model=auto or model=linear, or give the whole terms as an inline multiplet.` }]
}

const missingOf = (term: { twoS: number; l: number; levels: { twoJ: number }[] }): number[] => {
  const missing: number[] = []
  for (let twoJ = Math.abs(term.twoS - 2 * term.l); twoJ <= term.twoS + 2 * term.l; twoJ += 2) if (!term.levels.some((level) => level.twoJ === twoJ)) missing.push(twoJ)
  return missing
}

/**
 * Reads a bulk request against an edition: every line and multiplet becomes plain numbers, and everything that is wrong is told at once, at
 * its place in the body. Refuses what is too large before any of it is computed.
 */
export async function planPredictions(snapshot: Snapshot, body: PredictionsAsked): Promise<PredictionPlan> {
  const options = optionsOf(body)
  const { field, faults } = readField(body.field)
  const asked = body.lines.length + body.multiplets.length
  if (asked === 0) faults.push({ pointer: '', code: 'prediction_empty', detail: 'Name at least one line or multiplet.' })
  if (fieldCount(field) * asked > MOST_VALUES) throw tooLarge(fieldCount(field) * asked)
  const maker = new BlockMaker(snapshot, { gValues: body.g_values, gS: options.gS })
  const blocks: BlockGiven[] = []
  const read = (at: string, make: () => BlockGiven): void => {
    try {
      const block = make()
      blocks.push(block)
      if (options.model === 'intermediate') faults.push(...modelFaults(block, at))
    } catch (error) {
      faults.push(...faultsAt(error, at))
    }
  }
  for (const [i, line] of body.lines.entries()) {
    if (i % READ_AT_ONCE === READ_AT_ONCE - 1) await others()
    read('transition' in line ? `/lines/${i}/transition` : `/lines/${i}`, () => maker.line(line, `/lines/${i}`))
  }
  for (const [i, multiplet] of body.multiplets.entries()) {
    if (i % READ_AT_ONCE === READ_AT_ONCE - 1) await others()
    read('transition' in multiplet ? `/multiplets/${i}/transition` : `/multiplets/${i}`, () => maker.multiplet(multiplet, `/multiplets/${i}`))
  }
  if (faults.length > 0) throw faultsProblem(faults)
  const oversized = blocks.flatMap((block, i) => givenMultipletFault(block, 'answer_too_large', `/multiplets/${i - body.lines.length}`) ?? [])
  if (oversized[0] !== undefined) throw new Problem('answer_too_large', oversized[0].detail, { errors: oversized, extra: { limit: GIVEN_MULTIPLET_MOST } })
  const values = fieldCount(field) * blocks.reduce((sum, block) => sum + componentCount(block), 0)
  if (values > MOST_VALUES) throw tooLarge(values)
  const lines = blocks.reduce((sum, block) => sum + linePairs(block).length, 0)
  return { blocks, field, fieldText: JSON.stringify(body.field), options, values, lines, warnings: warningsOf(blocks, options, maker.exchanged) }
}
