import { isTriangle } from '@/lib/atomic/half'
import { parseTerm } from '@/lib/atomic/term'
import { quoted } from '@/lib/units/number'
import { Coupling } from '@/openapi/schemas/common'
import type { LevelValues } from '@/openapi/schemas/change'
import type { LevelRow } from '../rows'
import type { Findings } from './findings'
import { readLevelTerm } from './level-term'
import { isGiven, readChoice, readGivenNumber, readText } from './numbers'

/** The columns that say in which coupling a level is named, and how. */
export type Momenta = Pick<LevelRow, 'coupling' | 'label' | 'twoS' | 'l' | 'twoJ' | 'twoK' | 'coreTwoS' | 'coreL' | 'coreTwoJ' | 'lOuter' | 'outerTwoJ' | 'parity'>

const NONE = { twoS: null, l: null, twoK: null, coreTwoS: null, coreL: null, coreTwoJ: null, lOuter: null, outerTwoJ: null }

interface Core { twoS: number; l: number; twoJ: number; parity: 'even' | 'odd' | null }

function readCore(findings: Findings, given: string | null, needed: boolean): Core | null {
  if (given === null) {
    if (needed) findings.error('core_missing', 'core', 'Pair coupling needs the term of the core with its J, such as 2P*3/2.')
    return null
  }
  const term = parseTerm(given)
  if (!term.ok) findings.error(term.code, 'core', term.detail)
  else if (term.value.kind !== 'LS') findings.error('term_malformed', 'core', `${quoted(given)} must be an LS term of the core, such as 2P*3/2.`)
  else if (term.value.twoJ === null) findings.error('j_missing', 'core', `${quoted(given)} has no J: write the core's term with its J, such as 2P*3/2.`)
  else return { twoS: term.value.twoS, l: term.value.l, twoJ: term.value.twoJ, parity: term.value.parity }
  return null
}

function coreFits(findings: Findings, core: Core, lOuter: number | null, parity: 'even' | 'odd'): void {
  if (core.parity !== 'odd' || lOuter === null) return
  if ((1 + lOuter) % 2 !== (parity === 'odd' ? 1 : 0)) findings.error('parity_mismatch', 'core', `A core marked odd and an outer electron of l = ${lOuter} make ${parity === 'odd' ? 'an even' : 'an odd'} level, and the symbol says ${parity}.`)
}

/** Reads coupling, term, core and outer l into columns that agree with each other; null with errors where they do not. */
export function readMomenta(findings: Findings, given: LevelValues): Momenta | null {
  const coupling = isGiven(given.coupling) ? readChoice(findings, 'coupling', given.coupling, Coupling.options, 'missing_field', null) : 'LS'
  const text = readText(given.term)
  if (text === null) findings.error('missing_field', 'term', 'The term symbol with its J is missing, such as 2P*3/2.')
  if (coupling === null || text === null) return null
  const read = readLevelTerm(text, coupling)
  if (!read.ok) {
    findings.error(read.code, 'term', read.detail)
    return null
  }
  const { label, term, twoJ, parity } = read.value
  const lOuter = readGivenNumber(findings, 'l_outer', given.l_outer, { integer: true, min: 0, max: 30 })
  const coreText = readText(given.core)
  const base = { coupling, label, twoJ, parity, ...NONE }
  if (term === null || term.kind === 'LS') {
    for (const [field, value] of [['core', coreText], ['l_outer', given.l_outer]] as const) {
      if (isGiven(value)) findings.error('field_not_applicable', field, `A level of ${coupling === 'LS' ? 'LS coupling' : 'no coupling'} has no ${field}: leave it out, or set coupling to J1K or jj.`)
    }
    return term === null ? base : { ...base, twoS: term.twoS, l: term.l }
  }
  const core = readCore(findings, coreText, coupling === 'J1K')
  if (core !== null) coreFits(findings, core, lOuter, parity)
  if (term.kind === 'jj') {
    if (core !== null && core.twoJ !== term.twoJ1) {
      findings.error('core_mismatch', 'core', 'The core\'s J and the first number of the jj symbol must be the same.')
      return null
    }
    return { ...base, coreTwoS: core?.twoS ?? null, coreL: core?.l ?? null, coreTwoJ: term.twoJ1, lOuter, outerTwoJ: term.twoJ2 }
  }
  if (!isGiven(given.l_outer)) findings.error('missing_field', 'l_outer', 'Pair coupling needs l of the outer electron: 0 for s, 1 for p, 2 for d.')
  if (core === null || lOuter === null) return null
  if (!isTriangle(core.twoJ, 2 * lOuter, term.twoK)) {
    findings.error('term_impossible', 'term', `The core's J = ${core.twoJ / 2} and the outer l = ${lOuter} make K from ${Math.abs(core.twoJ - 2 * lOuter) / 2} to ${(core.twoJ + 2 * lOuter) / 2} in unit steps; K = ${term.twoK / 2} cannot be.`)
    return null
  }
  return { ...base, twoK: term.twoK, coreTwoS: core.twoS, coreL: core.l, coreTwoJ: core.twoJ, lOuter }
}
