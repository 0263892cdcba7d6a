import { type DifferenceFeatures, hyperfineDifference, hyperfineFeatures, termDifference, termFeatures } from '@/lib/atomic/crossings'
import { G_S, GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { fieldTerm } from '@/lib/atomic/field-term'
import { formatHalf } from '@/lib/atomic/half'
import { chooseG, type GChoice } from '@/lib/prediction/g-values'
import { gSWarnings, gWarnings, type Warning } from '@/lib/prediction/component-warnings'
import { type NuclearLevel, readyNuclearLevel } from '@/lib/prediction/hyperfine'
import { twoJOf } from '@/lib/prediction/levels'
import { type MembersTold, validityEnd, wholeTerm, whyNotWhole } from '@/lib/prediction/term-levels'
import type { Crossings } from '@/openapi/schemas/level'

/** A sublevel by its zero-field name: F, m_F or J, m, as twice the values. */
export interface SublevelPair {
  twoF: number
  twoM: number
}

export interface CrossingsAsked extends GChoice {
  a: SublevelPair
  b: SublevelPair
  fromTesla: number
  toTesla: number
  hyperfine: boolean
  isotope: number | null
}

interface Found {
  features: DifferenceFeatures
  /** How many MHz are one of the unit that the features are in. */
  mhz: number
  massNumber: number | null
  warnings: Warning[]
}

/** Names the parameter that a sublevel was given by, where there is no such one. */
function named<T>(parameter: 'a' | 'b', find: () => T): T {
  try {
    return find()
  } catch (error) {
    throw error instanceof PhysicsError && error.code === 'no_such_sublevel' ? new PhysicsError(error.code, error.detail, parameter) : error
  }
}

function ofNucleus(found: NuclearLevel, asked: CrossingsAsked): Found {
  const { ready, isotope, warnings } = readyNuclearLevel(found, asked)
  const nameOf = ({ twoF, twoM }: SublevelPair) => ({ twoF, twoMF: twoM })
  const [a, b] = [nameOf(asked.a), nameOf(asked.b)]
  named('a', () => hyperfineDifference(ready, a, a))
  named('b', () => hyperfineDifference(ready, b, b))
  return { features: hyperfineFeatures(ready, a, b, asked.fromTesla, asked.toTesla), mhz: 1, massNumber: isotope.massNumber, warnings }
}

function ofTerm({ level }: NuclearLevel, members: MembersTold, asked: CrossingsAsked): Found {
  const chosen = chooseG(level, asked, 'level')
  const end = validityEnd(twoJOf(level), chosen.g, members, asked)
  const levels = wholeTerm(end)
  if (levels === null) throw new PhysicsError('term_incomplete', `Sublevels cross by diagonalisation within the term, and ${whyNotWhole(level.id, end) ?? 'it is not whole'}.`, 'level')
  const term = fieldTerm(levels, { gS: asked.gS ?? G_S, gL: 1 })
  const nameOf = ({ twoF, twoM }: SublevelPair) => ({ twoJ: twoF, twoM })
  const [a, b] = [nameOf(asked.a), nameOf(asked.b)]
  named('a', () => termDifference(term, a, a))
  named('b', () => termDifference(term, b, b))
  const warnings = [...gSWarnings([level], asked), ...gWarnings({ level, chosen }, asked.gValues)]
  return { features: termFeatures(term, a, b, asked.fromTesla, asked.toTesla), mhz: GHZ_PER_INVCM * 1000, massNumber: null, warnings }
}

const toldName = ({ twoF, twoM }: SublevelPair, hyperfine: boolean): Crossings['a'] => ({
  name: hyperfine ? `F = ${formatHalf(twoF)}, m_F = ${formatHalf(twoM)}` : `J = ${formatHalf(twoF)}, m = ${formatHalf(twoM)}`,
  f: hyperfine ? twoF / 2 : null,
  j: hyperfine ? null : twoF / 2,
  m: twoM / 2,
})

/**
 * Crossings, anticrossings and stationary points of the difference of two sublevels between two fields: hyperfine sublevels (F, m_F) of a level for one
 * isotope, or sublevels (J, m) of the level's term. By root finding on analytic slopes. Refuses `no_such_sublevel`, `same_sublevel`,
 * `term_incomplete`, and what `takeIsotopes` refuses.
 */
export function crossingsOf(found: NuclearLevel, members: MembersTold, asked: CrossingsAsked): { crossings: Crossings; warnings: Warning[] } {
  const { a, b, hyperfine } = asked
  if (a.twoF === b.twoF && a.twoM === b.twoM) throw new PhysicsError('same_sublevel', `a and b are one sublevel, ${toldName(a, hyperfine).name}; name two.`, 'b')
  const { features, mhz, massNumber, warnings } = hyperfine ? ofNucleus(found, asked) : ofTerm(found, members, asked)
  const at = (fieldTesla: number) => ({ field_tesla: fieldTesla, field_gauss: fieldTesla * 1e4 })
  const invcm = mhz / (GHZ_PER_INVCM * 1000)
  return {
    crossings: {
      level: found.level.id,
      mass_number: massNumber,
      a: toldName(a, hyperfine),
      b: toldName(b, hyperfine),
      from_tesla: asked.fromTesla,
      to_tesla: asked.toTesla,
      crossings: features.crossings.map(({ fieldTesla, slope }) => ({ ...at(fieldTesla), slope_mhz_per_tesla: slope * mhz })),
      anticrossings: features.anticrossings.map(({ fieldTesla, gap }) => ({ ...at(fieldTesla), gap_mhz: gap * mhz, gap_invcm: gap * invcm })),
      stationary: features.stationary.map(({ fieldTesla, value, curvature, kind }) => ({
        ...at(fieldTesla),
        difference_mhz: value * mhz,
        difference_invcm: value * invcm,
        curvature_mhz_per_tesla2: curvature * mhz,
        kind,
      })),
    },
    warnings,
  }
}
