import { PhysicsError } from '@/lib/atomic/errors'
import { coupledRange } from '@/lib/atomic/half'
import { speciesOf, transitionIndices } from '@/lib/prediction/resolve'
import type { Snapshot } from '@/lib/catalogue/shape'
import { type Fault, faultsProblem, Problem } from '@/lib/problem'
import type { PredictedLine } from '@/lib/prediction/components'
import { besideOthers, inlineLevel, type InlineLevelGiven, termFaults } from '@/lib/prediction/inline'
import { intervalFaults, judgeInline } from '@/lib/prediction/judge'
import { twice } from '@/lib/prediction/levels'
import type { GivenTerms } from '@/lib/prediction/term-work'
import { transitionDetail } from '@/lib/prediction/transition'
import type { Kind } from '@/openapi/schemas/common'
import type { Level } from '@/openapi/schemas/level'
import type { Isotope, Species } from '@/openapi/schemas/species'

/** A line of levels that stand in a request, with the other levels of their terms where they are given. */
export interface InlineLineGiven {
  lower: InlineLevelGiven
  upper: InlineLevelGiven
  lower_others?: InlineLevelGiven[] | null | undefined
  upper_others?: InlineLevelGiven[] | null | undefined
  kind?: Kind | null | undefined
}

/** A line as a body of `POST /profiles` gives it. */
export type LineGiven = { kind?: Kind | null | undefined; weight: number; mass_u?: number | null | undefined } & ({ transition: string } | InlineLineGiven)

/** A line of a request, found in the table or made of its inline levels. */
export interface FoundLine {
  line: PredictedLine
  /** Null for a line of inline levels. */
  species: Species | null
  weight: number
}

/** A level of no table in the place of one: it is known by the name that refusals and warnings give it. */
function standIn(given: InlineLevelGiven, gS: number | null, name: string): Level {
  const known = inlineLevel(given, gS)
  return { ...known, id: given.label ?? name, species: '', configuration: '', energy_source: '', energy_evidence: 'computed', revision: 0 }
}

type Members = PredictedLine['terms']['lower']

/** The term of an inline level: itself, its others, and the J's that nobody gave. */
function termOf(level: Level, given: InlineLevelGiven, others: readonly InlineLevelGiven[], gS: number | null): Members {
  const members = [{ given, level }, ...others.map((other, i) => ({ given: other, level: standIn(other, gS, `level ${i + 2} of the term of ${level.id}`) }))]
  const js = new Set(members.map((member) => twice(member.given.j)))
  return {
    s: given.s,
    l: given.l,
    levels: members
      .map((member) => ({ id: member.level.id, j: member.given.j, energy_invcm: member.given.energy_invcm, energy_unc_invcm: null, g_j: member.level.g_j.adopted, g_j_unc: null }))
      .sort((a, b) => a.j - b.j),
    missing_j: coupledRange(twice(given.s), 2 * given.l).filter((twoJ) => !js.has(twoJ)).map((twoJ) => twoJ / 2),
  }
}

/** A line of inline levels as the table would tell it. Refuses with every fault of its levels at once, pointers counted from the line. */
export function inlineLine(given: InlineLineGiven, gS: number | null, name: string): PredictedLine {
  const [lowerOthers, upperOthers] = [given.lower_others ?? [], given.upper_others ?? []]
  const faults = [...termFaults([given.lower, ...lowerOthers], besideOthers('/lower')), ...termFaults([given.upper, ...upperOthers], besideOthers('/upper')), ...intervalFaults(given.lower, given.upper)]
  if (faults.length > 0) throw faultsProblem(faults)
  const { transition, exchanged } = judgeInline(given.lower, given.upper, given.kind, gS)
  const ends = [{ level: given.lower, others: lowerOthers }, { level: given.upper, others: upperOthers }] as const
  const [low, high] = exchanged ? [ends[1], ends[0]] : ends
  const [lower, upper] = [standIn(low.level, gS, `the lower level of ${name}`), standIn(high.level, gS, `the upper level of ${name}`)]
  return {
    ...transition,
    id: name,
    lower,
    upper,
    terms: { lower: termOf(lower, low.level, low.others, gS), upper: termOf(upper, high.level, high.others, gS) },
    hyperfine: { lower: [], upper: [] },
  }
}

/** The terms of a line of inline levels, as they bound a request. */
export const givenTerms = ({ kind, terms }: PredictedLine): GivenTerms => {
  const levels = (members: Members) => ({ levels: members.levels.map((level) => ({ twoJ: twice(level.j), energyInvcm: level.energy_invcm, g: level.g_j })) })
  return { kind, lower: levels(terms.lower), upper: levels(terms.upper) }
}

/** The faults of a refusal, in the body's place of a line. */
function faultsAt(error: unknown, at: string, parts: Readonly<Record<string, string>>): Fault[] {
  if (error instanceof PhysicsError) return [{ pointer: parts[error.field ?? ''] ?? at, code: error.code, detail: error.detail }]
  if (!(error instanceof Problem)) throw error
  if (error.errors.length === 0) return [{ pointer: parts.transition ?? at, code: error.code, detail: error.detail }]
  return error.errors.map(({ parameter, pointer, code, detail }) => ({ pointer: pointer === undefined ? (parts[parameter ?? ''] ?? at) : `${at}${pointer}`, code, detail }))
}

/** Where in the body the parts of a line stand that a refusal can name. */
export const lineParts = (index: number): Readonly<Record<string, string>> => {
  const at = `/lines/${index}`
  return { transition: `${at}/transition`, upper: `${at}/upper`, lower: `${at}/lower`, kind: `${at}/kind`, model: '/model', g_values: '/g_values', mass_u: '/mass_u', widths: '', resolving_power: '/resolving_power', isotope: '/isotope' }
}

/** The lines that a request names; every one that cannot be had is a fault of its place in the body. */
export function foundLines(snapshot: Snapshot, given: readonly LineGiven[], gS: number | null): { found: (FoundLine | null)[]; faults: Fault[] } {
  const faults: Fault[] = []
  const found = given.map((one, index): FoundLine | null => {
    try {
      if ('lower' in one) return { line: inlineLine(one, gS, `line ${index + 1}`), species: null, weight: one.weight }
      const [first, second] = transitionIndices(snapshot, one.transition)
      const line = transitionDetail(snapshot, first, second, one.kind ?? undefined)
      return { line, species: speciesOf(snapshot, line.lower.species), weight: one.weight }
    } catch (error) {
      faults.push(...faultsAt(error, `/lines/${index}`, lineParts(index)))
      return null
    }
  })
  return { found, faults }
}

export const physicsFault = (error: PhysicsError, index: number): Fault => faultsAt(error, `/lines/${index}`, lineParts(index))[0] as Fault

/** The isotope of a species by mass number. Throws `isotope_unknown`, naming those listed. */
export function isotopeOf(species: Species, massNumber: number): Isotope {
  const isotope = species.isotopes.find((one) => one.mass_number === massNumber)
  if (isotope) return isotope
  const listed = species.isotopes.map((one) => one.mass_number)
  throw new PhysicsError('isotope_unknown', `${species.id} lists no isotope of mass number ${massNumber}; ${listed.length === 0 ? 'it lists none' : `it lists ${listed.join(', ')}`}.`, 'isotope')
}
