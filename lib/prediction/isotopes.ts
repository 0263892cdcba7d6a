import { PhysicsError } from '@/lib/atomic/errors'
import type { Warning } from '@/lib/prediction/component-warnings'
import { twice } from '@/lib/prediction/levels'
import type { HyperfineConstants } from '@/openapi/schemas/level'
import type { Isotope } from '@/openapi/schemas/species'

/** What is asked of isotopes: a mass number, the natural mixture, or nothing. */
export type IsotopeAsked = number | 'natural' | null

/** A level with the constants stored for it. */
export interface NuclearEnd {
  id: string
  twoJ: number
  constants: readonly HyperfineConstants[]
}

/** An isotope taken for an answer. */
export interface TakenIsotope {
  massNumber: number
  twoI: number
  /** Whether the table tells the spin; where it does not, 0 was taken. */
  spinKnown: boolean
  gI: number | null
  abundancePercent: number | null
  /** Share in the answer; all sum to 1. */
  weight: number
  /** Of each end, in the order given; null where the table has none. */
  constants: (HyperfineConstants | null)[]
}

export interface TakenIsotopes {
  isotopes: TakenIsotope[]
  /** Sum of the abundances that the weights were divided by, per cent; null for one isotope. */
  listedPercent: number | null
  warnings: Warning[]
}

const constantsOf = (end: NuclearEnd, massNumber: number): HyperfineConstants | null => end.constants.find((one) => one.mass_number === massNumber) ?? null

/** Whether the table has a constant A of the isotope for any end. */
const hasConstants = (ends: readonly NuclearEnd[], massNumber: number): boolean => ends.some((end) => (constantsOf(end, massNumber)?.a_mhz ?? null) !== null)

const listOf = (numbers: readonly number[]): string => (numbers.length === 0 ? 'none' : numbers.join(', '))
const namesOf = (ends: readonly NuclearEnd[]): string => ends.map((end) => end.id).join(' and ')

const taken = (isotope: Isotope, ends: readonly NuclearEnd[], weight: number): TakenIsotope => ({
  massNumber: isotope.mass_number,
  twoI: twice(isotope.nuclear_spin ?? 0),
  spinKnown: isotope.nuclear_spin !== null,
  gI: isotope.g_i,
  abundancePercent: isotope.abundance_percent,
  weight,
  constants: ends.map((end) => constantsOf(end, isotope.mass_number)),
})

function oneIsotope(isotopes: readonly Isotope[], ends: readonly NuclearEnd[], asked: number): TakenIsotope {
  const isotope = isotopes.find((one) => one.mass_number === asked)
  if (!isotope) throw new PhysicsError('isotope_unknown', `The table lists no isotope of mass number ${asked} here; listed: ${listOf(isotopes.map((one) => one.mass_number))}.`, 'isotope')
  if (isotope.nuclear_spin === null) throw new PhysicsError('nuclear_spin_unknown', `The nuclear spin of mass number ${asked} is not in the table.`, 'isotope')
  if (isotope.nuclear_spin > 0 && ends.some((end) => end.twoJ > 0) && !hasConstants(ends, asked)) {
    const known = isotopes.map((one) => one.mass_number).filter((mass) => hasConstants(ends, mass))
    throw new PhysicsError('hyperfine_unknown', `The table holds no constant A of mass number ${asked} for ${namesOf(ends)}; isotopes with constants there: ${listOf(known)}.`, 'isotope')
  }
  return taken(isotope, ends, 1)
}

function theOnlyOne(isotopes: readonly Isotope[], ends: readonly NuclearEnd[]): { isotope: TakenIsotope; warning: Warning } {
  const known = isotopes.map((one) => one.mass_number).filter((mass) => hasConstants(ends, mass))
  const [first, second] = known
  if (first === undefined) throw new PhysicsError('hyperfine_unknown', `The table holds no hyperfine constants for ${namesOf(ends)}.`, 'hyperfine')
  if (second !== undefined) throw new PhysicsError('isotope_ambiguous', `Several isotopes have constants for ${namesOf(ends)}: name one of ${known.join(', ')} by isotope=.`, 'isotope')
  return {
    isotope: oneIsotope(isotopes, ends, first),
    warning: { code: 'isotope_chosen', detail: `Mass number ${first} was taken: it is the only isotope with hyperfine constants here.` },
  }
}

function naturalMixture(isotopes: readonly Isotope[], ends: readonly NuclearEnd[]): TakenIsotopes {
  const known = isotopes.filter((isotope) => (isotope.abundance_percent ?? 0) > 0)
  const listedPercent = known.reduce((sum, isotope) => sum + (isotope.abundance_percent ?? 0), 0)
  if (!(listedPercent > 0)) throw new PhysicsError('abundance_unknown', 'No abundance is known for any isotope here, so no natural mixture can be made; name one isotope.', 'isotope')
  const warnings: Warning[] = []
  if (Math.abs(listedPercent - 100) > 0.05) {
    warnings.push({ code: 'abundance_incomplete', detail: `The isotopes listed make ${Number(listedPercent.toPrecision(6))} % of the element; their weights are divided by that, so that they sum to 1.` })
  }
  return { isotopes: known.map((isotope) => taken(isotope, ends, (isotope.abundance_percent ?? 0) / listedPercent)), listedPercent, warnings }
}

/** What was put in where the table says nothing. */
function gaps(isotopes: readonly TakenIsotope[], ends: readonly NuclearEnd[]): Warning[] {
  const warnings: Warning[] = []
  const spinless = isotopes.filter((isotope) => !isotope.spinKnown).map((isotope) => isotope.massNumber)
  if (spinless.length > 0) warnings.push({ code: 'nuclear_spin_unknown', detail: `The nuclear spin of mass number ${listOf(spinless)} is not in the table; it is taken as 0.` })
  const spinning = isotopes.filter((isotope) => isotope.twoI > 0)
  ends.forEach((end, at) => {
    const missing = spinning.filter((isotope) => (isotope.constants[at]?.a_mhz ?? null) === null).map((isotope) => isotope.massNumber)
    if (end.twoJ > 0 && missing.length > 0) {
      warnings.push({ code: 'hyperfine_constants_missing', detail: `The table holds no constant A of ${end.id} for mass number ${listOf(missing)}; it is taken as 0, so that level's own hyperfine structure is left out.` })
    }
  })
  const without = spinning.filter((isotope) => isotope.gI === null).map((isotope) => isotope.massNumber)
  if (without.length > 0) warnings.push({ code: 'g_i_unknown', detail: `g_I of mass number ${listOf(without)} is not in the table and taken as 0: the nucleus's own moment in the field is left out.` })
  return warnings
}

/**
 * The isotopes that an answer is made of: the one named; where none is, the only one with constants; or the natural mixture by abundance,
 * renormalised. Refuses `isotope_unknown`, `isotope_ambiguous`, `hyperfine_unknown`, `nuclear_spin_unknown`, `abundance_unknown`.
 */
export function takeIsotopes(isotopes: readonly Isotope[], ends: readonly NuclearEnd[], asked: IsotopeAsked): TakenIsotopes {
  const made = ((): TakenIsotopes => {
    if (asked === 'natural') return naturalMixture(isotopes, ends)
    if (asked !== null) return { isotopes: [oneIsotope(isotopes, ends, asked)], listedPercent: null, warnings: [] }
    const { isotope, warning } = theOnlyOne(isotopes, ends)
    return { isotopes: [isotope], listedPercent: null, warnings: [warning] }
  })()
  return { ...made, warnings: [...made.warnings, ...gaps(made.isotopes, ends)] }
}
