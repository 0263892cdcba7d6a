import { farFromCoupled } from '@/lib/atomic/adopted'
import { checkLevelOfConfiguration, type Configuration } from '@/lib/atomic/configuration'
import { formatHalf } from '@/lib/atomic/half'
import { isShell } from '@/lib/atomic/shells'
import { gBounds, jjG, landeG, pairG } from '@/lib/atomic/lande'
import type { LevelRow } from '../rows'
import { type Atom, decimalsOf, type Findings, type LevelParts, readPrinted } from '../values'

type Momenta = NonNullable<LevelParts['momenta']>

/** g in the level's own coupling; null where that gives none. */
export function coupledG(m: Momenta): number | null {
  if (m.coupling === 'LS') return landeG({ twoS: m.twoS ?? 0, l: m.l ?? 0, twoJ: m.twoJ })
  if (m.coreTwoS === null || m.coreL === null || m.coreTwoJ === null || m.lOuter === null) return null
  const core = { twoS: m.coreTwoS, l: m.coreL, twoJ: m.coreTwoJ }
  if (m.coupling === 'J1K') return pairG({ core, lOuter: m.lOuter, twoK: m.twoK ?? 0, twoJ: m.twoJ })
  return m.coupling === 'jj' ? jjG({ core, lOuter: m.lOuter, twoJOuter: m.outerTwoJ ?? 0, twoJ: m.twoJ }) : null
}

const CURES = {
  electron_count: 'configuration', core_unknown: 'configuration', term_not_allowed: 'term', j_not_half_integer: 'term', parity_mismatch: 'term',
} as const

/** The outer electron of pair and jj coupling, and the core where the configuration names it. */
function checkCore(findings: Findings, configuration: Configuration, m: Momenta): void {
  const last = [...configuration.parts].reverse().find(isShell)
  if (last !== undefined && m.lOuter !== null && last.count === 1 && last.l !== m.lOuter) {
    findings.error('l_outer_mismatch', 'l_outer', `The last electron of the configuration has l = ${last.l}, and l_outer says ${m.lOuter}.`)
  }
  const parent = [...configuration.parts].reverse().find((part) => part.kind === 'parent')
  const outermost = configuration.parts.at(-1)
  if (parent?.kind !== 'parent' || parent.term.twoJ === null || m.coreTwoS === null || outermost === parent) return
  if (parent.term.twoJ !== m.coreTwoJ || parent.term.twoS !== m.coreTwoS || parent.term.l !== m.coreL) {
    findings.error('core_mismatch', 'core', 'The core and the parent in the configuration are different terms: mend the one or the other.')
  }
}

function checkPhysics(findings: Findings, parts: LevelParts, atom: Atom | null): void {
  const { configuration, momenta } = parts
  if (configuration === null) return
  if (configuration.electrons !== null) findings.error('electron_count', 'configuration', configuration.electrons)
  if (momenta === null) return
  const electrons = atom === null ? null : atom.z - atom.charge
  const claims = { electrons: electrons ?? momenta.twoJ, twoJ: momenta.twoJ, parity: momenta.parity, twoS: momenta.twoS, l: momenta.l }
  for (const problem of checkLevelOfConfiguration(configuration.configuration, claims)) {
    const cure = problem.code === 'parity_mismatch' ? ` ${configuration.parity === 'odd' ? 'Mark the term odd with *' : 'Leave the odd mark out of the term'}, or mend the configuration.` : ''
    findings.error(problem.code, CURES[problem.code], `${problem.detail}${cure}`)
  }
  if (momenta.coupling === 'J1K' || momenta.coupling === 'jj') checkCore(findings, configuration.configuration, momenta)
}

/** Under which name the curator gave a measured g_J. */
const gField = ({ shortG }: LevelParts, at: number): string => (shortG ? 'g_j_measured' : `measured_g.${at}.value`)

/** Every g_J within what any coupling of the open shells can give. */
function checkG(findings: Findings, parts: LevelParts, before: LevelRow | null): void {
  const { configuration, momenta, measured, gChosen } = parts
  if (momenta === null) return
  const given: { value: number; field: string }[] = (measured ?? []).map((one, at) => ({ value: one.value, field: gField(parts, at) }))
  if (gChosen !== null) given.push({ value: gChosen, field: 'g_j_chosen' })
  if (given.length === 0) return
  if (momenta.twoJ === 0) {
    for (const { field } of given) findings.error('g_not_applicable', field, 'A level of J = 0 has no g_J: leave it out, or mend J.')
    return
  }
  const bounds = configuration === null ? null : gBounds({ twoSMax: configuration.twoSMax, twoJ: momenta.twoJ })
  for (const { value, field } of given) {
    if (bounds !== null && (value < bounds.lower || value > bounds.upper)) {
      findings.error('g_impossible', field, `g_J = ${value} lies outside ${bounds.lower.toFixed(4)} to ${bounds.upper.toFixed(4)}, the bounds of any coupling of these electrons at J = ${formatHalf(momenta.twoJ)}.`)
    }
  }
  const same = before !== null && JSON.stringify([before.measured, before.twoJ, before.twoS, before.l, before.coupling]) === JSON.stringify([measured, momenta.twoJ, momenta.twoS, momenta.l, momenta.coupling])
  const coupled = coupledG(momenta)
  if (same || coupled === null) return
  measured?.forEach(({ value }, at) => {
    if (!farFromCoupled(value, coupled)) return
    const percent = coupled === 0 ? '' : `, ${((100 * Math.abs(value - coupled)) / Math.abs(coupled)).toFixed(1)} % away`
    findings.warning('g_far_from_coupled', gField(parts, at), `The measured g_J ${value} and the coupled one ${coupled.toPrecision(6)} differ by more than 2 %${percent}: look at the assignment, or say why.`)
  })
}

/** Whether the last digit stands beyond the second figure of the uncertainty. */
const beyond = (decimals: number, unc: number): boolean => unc > 0 && 10 ** -decimals < (unc / 100) * (1 - 1e-9)

function checkDigits(findings: Findings, parts: LevelParts): void {
  const { energyInvcm, energyUncInvcm, energyLiteral, measured } = parts
  const digits = (literal: string | null, value: number): number => (literal === null ? null : readPrinted(literal)?.decimals) ?? decimalsOf(value)
  if (energyInvcm !== null && energyUncInvcm !== null && beyond(digits(energyLiteral, energyInvcm), energyUncInvcm)) {
    findings.warning('digits_beyond_uncertainty', energyLiteral === null ? 'energy_invcm' : 'energy_literal', `The energy is written with digits far below its uncertainty of ${energyUncInvcm} cm^-1: they tell nothing, or the uncertainty is wrong.`)
  }
  // the ground level's energy is exact, and nothing else is
  if (energyUncInvcm === 0 && energyInvcm !== 0) findings.warning('uncertainty_zero', 'energy_unc_invcm', 'An uncertainty of zero says that the energy is exact: leave it out where it is not known.')
  measured?.forEach(({ value, unc, literal }, at) => {
    if (unc === 0) findings.warning('uncertainty_zero', gField(parts, at), 'An uncertainty of zero says that the measured g_J is exact: leave it out where it is not known.')
    if (unc !== null && beyond(digits(literal, value), unc)) {
      findings.warning('digits_beyond_uncertainty', gField(parts, at), `The measured g_J is written with digits far below its uncertainty of ${unc}: they tell nothing, or the uncertainty is wrong.`)
    }
  })
}

/** What can be said of a level without looking at any other. */
export function checkLevelAlone(findings: Findings, parts: LevelParts, atom: Atom | null, before: LevelRow | null): void {
  checkPhysics(findings, parts, atom)
  if (parts.energyInvcm !== null && parts.energyInvcm < 0) findings.error('energy_negative', 'energy_invcm', `The energy ${parts.energyInvcm} cm^-1 lies below the ground level, which is the zero of the scale.`)
  checkG(findings, parts, before)
  checkDigits(findings, parts)
}
