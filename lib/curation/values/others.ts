import { formatHalf, parseHalf } from '@/lib/atomic/half'
import { elementBySymbol, toRoman } from '@/lib/atomic/elements'
import { parseConfiguration, printConfiguration } from '@/lib/atomic/configuration'
import { SOURCE_KINDS } from '@/db/schema'
import { quoted } from '@/lib/units/number'
import { Evidence } from '@/openapi/schemas/common'
import type { HyperfineValues, IsotopeValues, SourceValues, SpeciesValues } from '@/openapi/schemas/change'
import type { HyperfineRow, IsotopeRow, SourceRow, SpeciesRow } from '../rows'
import type { Findings } from './findings'
import { checkLengths } from './lengths'
import { isGiven, readChoice, readGivenNumber, readText, readUncertainty } from './numbers'

const EVIDENCE_WANTED = `Say how far the values were checked against the source: ${Evidence.options.join(', ')}.`

const needText = (findings: Findings, field: string, given: string | null | undefined, detail: string): string | null => {
  const text = readText(given)
  if (text === null) findings.error(field === 'source' ? 'missing_source' : 'missing_field', field, detail)
  return text
}

/** DOI without the address of its resolver. */
function readDoi(findings: Findings, given: string | null | undefined): string | null {
  const text = readText(given)
  if (text === null) return null
  const doi = text.replace(/^(?:https?:\/\/(?:dx\.)?doi\.org\/|doi:\s*)/i, '')
  if (/^10\.\d{4,9}\/[^\s\p{C}]{1,180}$/u.test(doi)) return doi
  findings.error('doi_malformed', 'doi', `${quoted(text)} is not a DOI; it begins with 10., such as 10.1063/1.2943652.`)
  return null
}

export function readSource(findings: Findings, given: SourceValues): SourceRow | null {
  checkLengths(findings, 'source', given)
  const citation = needText(findings, 'citation', given.citation, 'A source needs its citation: authors, where it stands, year.')
  const kind = readChoice(findings, 'kind', given.kind, SOURCE_KINDS, 'missing_field', `Say what it is: ${SOURCE_KINDS.join(', ')}.`)
  const year = readGivenNumber(findings, 'year', given.year, { integer: true, min: 1800, max: new Date().getUTCFullYear() + 2 })
  const doi = readDoi(findings, given.doi)
  if (citation === null || kind === null || findings.errors > 0) return null
  return { citation, kind, authors: readText(given.authors), title: readText(given.title), journal: readText(given.journal), year, doi, note: readText(given.note) }
}

export const writeSource = (row: SourceRow): SourceValues => ({ citation: row.citation, kind: row.kind, authors: row.authors, title: row.title, journal: row.journal, year: row.year, doi: row.doi, note: row.note })

/** Element, nuclear charge and charge from `Fe-II`; null where there is no such ion. */
export function ionOf(id: string): { element: string; z: number; charge: number } | null {
  const [symbol = '', numeral = ''] = id.split('-')
  const element = elementBySymbol(symbol)
  if (element === null) return null
  for (let charge = 0; charge < element.z; charge += 1) if (toRoman(charge + 1) === numeral) return { element: symbol, z: element.z, charge }
  return null
}

function readCoreConfiguration(findings: Findings, given: string | null | undefined): string | null {
  const text = readText(given)
  if (text === null) return ''
  const core = parseConfiguration(text)
  if (core.ok) return printConfiguration(core.value)
  findings.error(core.code, 'core_configuration', core.detail)
  return null
}

export function readSpecies(findings: Findings, id: string, given: SpeciesValues): SpeciesRow | null {
  checkLengths(findings, 'species', given)
  const ion = ionOf(id)
  if (ion === null) findings.error('species_impossible', null, `There is no ion ${id}: write the element's symbol and its stage in Roman numerals, such as Fe-II; an atom has as many stages as electrons.`)
  const name = needText(findings, 'name', given.name, 'A species needs its name, such as sodium.')
  const coreConfiguration = readCoreConfiguration(findings, given.core_configuration)
  const energy = readGivenNumber(findings, 'ionisation_energy_invcm', given.ionisation_energy_invcm, { above: 0, unit: 'cm^-1' })
  const source = readText(given.ionisation_source)
  const evidence = readChoice(findings, 'ionisation_evidence', given.ionisation_evidence, Evidence.options, 'missing_evidence', energy === null ? null : EVIDENCE_WANTED)
  if (energy !== null && source === null) findings.error('missing_source', 'ionisation_source', 'The ionisation energy needs the key of its source.')
  if (ion === null || name === null || coreConfiguration === null || findings.errors > 0) return null
  return { name, ...ion, coreConfiguration, ionisationEnergyInvcm: energy, ionisationSource: source, ionisationEvidence: evidence, note: readText(given.note) }
}

export const writeSpecies = (row: SpeciesRow): SpeciesValues => ({
  name: row.name, core_configuration: row.coreConfiguration, ionisation_energy_invcm: row.ionisationEnergyInvcm, ionisation_source: row.ionisationSource, ionisation_evidence: row.ionisationEvidence, note: row.note,
})

function readSpin(findings: Findings, given: IsotopeValues['nuclear_spin']): number | null {
  if (!isGiven(given)) return null
  const spin = parseHalf(given ?? '')
  if (spin.ok && spin.value >= 0) return spin.value
  findings.error('half_integer_malformed', 'nuclear_spin', spin.ok ? 'A nuclear spin is never negative.' : spin.detail)
  return null
}

export function readIsotope(findings: Findings, given: IsotopeValues): IsotopeRow | null {
  checkLengths(findings, 'isotope', given)
  const massU = readGivenNumber(findings, 'mass_u', given.mass_u, { above: 0, unit: 'u' })
  const twoI = readSpin(findings, given.nuclear_spin)
  const abundancePercent = readGivenNumber(findings, 'abundance_percent', given.abundance_percent, { min: 0, max: 100 })
  const gI = readGivenNumber(findings, 'g_i', given.g_i, { min: -1, max: 1, unit: 'in units of mu_B' })
  const source = needText(findings, 'source', given.source, 'The values need the key of their source.')
  const evidence = readChoice(findings, 'evidence', given.evidence, Evidence.options, 'missing_evidence', EVIDENCE_WANTED)
  if (source === null || evidence === null || findings.errors > 0) return null
  return { massU, twoI, abundancePercent, gI, source, evidence, note: readText(given.note) }
}

export const writeIsotope = (row: IsotopeRow): IsotopeValues => ({
  mass_u: row.massU, nuclear_spin: row.twoI === null ? null : formatHalf(row.twoI), abundance_percent: row.abundancePercent, g_i: row.gI, source: row.source, evidence: row.evidence, note: row.note,
})

export function readHyperfine(findings: Findings, given: HyperfineValues): HyperfineRow | null {
  checkLengths(findings, 'hyperfine', given)
  const aMhz = readGivenNumber(findings, 'a_mhz', given.a_mhz, { unit: 'MHz' })
  const aUncMhz = readUncertainty(findings, 'a_unc_mhz', given.a_unc_mhz)
  const bMhz = readGivenNumber(findings, 'b_mhz', given.b_mhz, { unit: 'MHz' })
  const bUncMhz = readUncertainty(findings, 'b_unc_mhz', given.b_unc_mhz)
  if (!isGiven(given.a_mhz) && !isGiven(given.b_mhz)) findings.error('missing_field', 'a_mhz', 'Give A, or B, or both.')
  const source = needText(findings, 'source', given.source, 'The constants need the key of their source.')
  const evidence = readChoice(findings, 'evidence', given.evidence, Evidence.options, 'missing_evidence', EVIDENCE_WANTED)
  if (source === null || evidence === null || findings.errors > 0) return null
  return { aMhz, aUncMhz, bMhz, bUncMhz, source, evidence, note: readText(given.note) }
}

export const writeHyperfine = (row: HyperfineRow): HyperfineValues => ({ a_mhz: row.aMhz, a_unc_mhz: row.aUncMhz, b_mhz: row.bMhz, b_unc_mhz: row.bUncMhz, source: row.source, evidence: row.evidence, note: row.note })
