import { adoptG, deviations, type MeasuredG } from '@/lib/atomic/adopted'
import { G_S } from '@/lib/atomic/constants'
import { type DerivationStep, jjDerivation, landeDerivation, pairDerivation } from '@/lib/atomic/derivation'
import { highestSpin, parseConfiguration } from '@/lib/atomic/configuration'
import { gBounds, landeG } from '@/lib/atomic/lande'
import { coupledAt, jjNumbers, lsNumbers, pairNumbers, twoJOf } from '@/lib/prediction/levels'
import type { GFactor, Level } from '@/openapi/schemas/level'

function derivationOf(level: Level, gS: number): GFactor['derivation'] {
  const [ls, pair, jj] = [lsNumbers(level), pairNumbers(level), jjNumbers(level)]
  const steps: DerivationStep[] = ls ? landeDerivation(ls, gS) : pair ? pairDerivation(pair, gS) : jj ? jjDerivation(jj, gS) : []
  return steps.map(({ label, text, exact, value }) => ({ label, text, value: exact ?? (value === null ? null : String(value)) }))
}

/** Limits of g_J in any coupling of the level's configuration; null for J = 0. */
function boundsOf(level: Level, gS: number): GFactor['bounds'] {
  const configuration = parseConfiguration(level.configuration)
  return configuration.ok ? gBounds({ twoSMax: highestSpin(configuration.value), twoJ: twoJOf(level), gS }) : null
}

const sentence = (text: string): string => `${text.charAt(0).toUpperCase()}${text.slice(1)}.`

function reasonOf(level: Level): string {
  const { g_j: g } = level
  if (g.status === 'not_applicable') return 'A level of J = 0 has one sublevel and no g_J.'
  const measured: MeasuredG[] = g.all_measured
  const automatic = adoptG({ coupled: g.coupled, measured })
  return g.basis === 'chosen' || automatic.adopted !== g.adopted ? 'A curator chose this value.' : sentence(automatic.reason)
}

/**
 * Everything about a level's g_J: adopted and why, coupled (real with the g_s asked, exact at g_s = 2), measured, their difference
 * (measured minus coupled), how the coupled value is derived, and the bounds of any coupling. An adopted value that is the coupled
 * one follows the g_s asked; whether to adopt it was decided with the CODATA g_s.
 */
export function gFactor(level: Level, gS: number = G_S): GFactor {
  const { g_j: g } = level
  const coupled = gS === G_S ? g.coupled : coupledAt(level, gS)
  const numbers = lsNumbers(level)
  const ls = numbers === null ? null : gS === G_S ? g.ls : landeG(numbers, { gS })
  const chosen = g.measured === null ? null : { value: g.measured, unc: g.measured_unc, evidence: g.measured_evidence ?? 'recalled' }
  return {
    level: level.id,
    g_s: gS,
    status: g.status,
    adopted: g.basis === 'coupled' ? coupled : g.adopted,
    adopted_unc: g.adopted_unc,
    basis: g.basis,
    reason: reasonOf(level),
    scheme: g.scheme,
    coupled,
    coupled_exact: g.coupled_exact,
    ls,
    ls_exact: g.ls_exact,
    measured: g.measured,
    measured_unc: g.measured_unc,
    measured_source: g.measured_source,
    measured_evidence: g.measured_evidence,
    all_measured: g.all_measured,
    difference: chosen === null || coupled === null ? null : chosen.value - coupled,
    difference_in_standard_deviations: chosen === null ? null : deviations(chosen, coupled),
    derivation: derivationOf(level, gS),
    bounds: boundsOf(level, gS),
  }
}
