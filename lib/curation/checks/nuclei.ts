import { formatHalf } from '@/lib/atomic/half'
import type { HyperfineRow, IsotopeRow } from '../rows'
import { levelExists, levelOf, speciesOfLevel, type Union, type Work } from './work'

const massOf = (subject: string): number => Number(subject.slice(subject.indexOf('/') + 1))

/** One isotope: what a nucleus of so many protons and neutrons can be. */
export function checkIsotope(union: Union, work: Work): void {
  const { subject, speciesId } = work.change
  const row = work.row as IsotopeRow | null
  const { findings } = work
  const species = union.species.get(speciesId ?? '')
  const massNumber = massOf(subject)
  if (species !== undefined && massNumber < species.z) findings.error('isotope_impossible', null, `A nucleus of ${species.element} has ${species.z} protons, so its mass number is at least ${species.z}.`)
  if (row === null) return
  if (row.massU !== null && Math.abs(row.massU - massNumber) > 0.3) findings.error('isotope_impossible', 'mass_u', `A mass of ${row.massU} u does not belong to mass number ${massNumber}: atomic masses are within 0.3 u of it.`)
  if (row.twoI !== null && (row.twoI - massNumber) % 2 !== 0) findings.error('isotope_impossible', 'nuclear_spin', `Mass number ${massNumber} is ${massNumber % 2 === 0 ? 'even, so the spin is a whole number' : 'odd, so the spin is half an odd number'}; ${formatHalf(row.twoI)} cannot be.`)
  if (row.twoI === 0 && row.gI !== null && row.gI !== 0) findings.error('isotope_impossible', 'g_i', 'A nucleus without spin has no magnetic moment: leave g_i out, or mend the spin.')
  for (const [key, { row: constants }] of union.hyperfine) {
    if (speciesOfLevel(key) !== speciesId || massOf(key) !== massNumber || row.twoI === null || union.hyperfine.get(key)?.work) continue
    if (row.twoI === 0 || (row.twoI < 2 && constants.bMhz !== null)) findings.error('hyperfine_impossible', 'nuclear_spin', `The table has hyperfine constants of this isotope in ${key.slice(0, key.indexOf('/'))} that a spin of ${formatHalf(row.twoI)} does not allow: replace those first.`)
  }
}

/** The abundances of an element's isotopes together; said at each isotope that a change touches. */
export function checkAbundances(union: Union, speciesId: string, works: readonly Work[]): void {
  let sum = 0
  for (const [id, row] of union.isotopes) if (id.startsWith(`${speciesId}/`)) sum += row.abundancePercent ?? 0
  if (sum <= 100.5) return
  for (const work of works) {
    if ((work.row as IsotopeRow | null)?.abundancePercent) work.findings.error('abundances_above_100', 'abundance_percent', `The abundances of the isotopes would come to ${Number(sum.toPrecision(6))} %.`)
  }
}

/** Hyperfine constants: a nucleus with spin in a level with J; B wants both of at least 1. */
export function checkHyperfine(union: Union, work: Work): void {
  const { subject, speciesId } = work.change
  const row = work.row as HyperfineRow | null
  const { findings } = work
  const [level = ''] = subject.split('/')
  const isotope = union.isotopes.get(`${speciesId ?? ''}/${massOf(subject)}`)
  if (!levelExists(union, level)) findings.error('level_unknown', null, `There is no level ${level} in use, in the edition or in this amendment.`)
  if (isotope === undefined) findings.error('isotope_unknown', null, `The isotope ${speciesId ?? ''}/${massOf(subject)} is neither in the edition nor in this amendment: add it first.`)
  const [twoI, twoJ] = [isotope?.twoI ?? null, levelOf(union, level)?.twoJ ?? null]
  if (row === null) return
  if (twoI === 0) findings.error('hyperfine_impossible', null, 'A nucleus without spin makes no hyperfine structure.')
  if (twoJ === 0) findings.error('hyperfine_impossible', null, 'A level of J = 0 has no hyperfine structure.')
  const small = [...(twoI === 1 ? ['I = 1/2'] : []), ...(twoJ === 1 ? ['J = 1/2'] : [])]
  if (row.bMhz !== null && small.length > 0) findings.error('hyperfine_impossible', 'b_mhz', `B is there only where I and J are at least 1; here ${small.join(' and ')}. Leave b_mhz out.`)
  if (row.bMhz === null && row.bUncMhz !== null) findings.error('hyperfine_impossible', 'b_unc_mhz', 'An uncertainty of B without B: leave it out.')
  if (row.aMhz === null && row.aUncMhz !== null) findings.error('hyperfine_impossible', 'a_unc_mhz', 'An uncertainty of A without A: leave it out.')
}

/** A level whose J changes while hyperfine constants stand on it. */
export function checkJOfHyperfine(union: Union, work: Work, constantsOf: ReadonlyMap<string, readonly string[]>): void {
  const after = levelOf(union, work.change.subject)
  if (after === undefined || after.twoJ >= 2) return
  for (const key of constantsOf.get(work.change.subject) ?? []) {
    const constants = union.hyperfine.get(key)
    if (constants === undefined || constants.work !== null) continue
    if (after.twoJ === 0 || constants.row.bMhz !== null) work.findings.error('hyperfine_impossible', 'term', `The table has hyperfine constants of this level (${key}) that J = ${formatHalf(after.twoJ)} does not allow: replace those too.`)
  }
}
