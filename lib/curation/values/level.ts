import { Evidence } from '@/openapi/schemas/common'
import type { Finding, LevelValues } from '@/openapi/schemas/change'
import type { LevelRow, MeasuredGRow } from '../rows'
import { type Atom, type ReadConfiguration, readConfiguration } from './atom'
import { Findings } from './findings'
import { checkLengths } from './lengths'
import { readChosen, readMeasured } from './level-g'
import { type Momenta, readMomenta } from './level-momenta'
import { printCore, printLevelTerm } from './level-term'
import { isGiven, readChoice, readGivenNumber, readPrinted, readText, readUncertainty } from './numbers'

/** What could be read of a level, even where the whole cannot be: the checks say as much as they can of it. */
export interface LevelParts {
  configuration: ReadConfiguration | null
  momenta: Momenta | null
  energyInvcm: number | null
  energyUncInvcm: number | null
  energyLiteral: string | null
  measured: MeasuredGRow[] | null
  /** The one measured g_J was given as g_j_measured. */
  shortG: boolean
  gChosen: number | null
}
export interface LevelReading { row: LevelRow | null; parts: LevelParts; findings: Finding[] }

const LARGEST_ENERGY = 1e9

function readEnergy(findings: Findings, given: LevelValues): { energyInvcm: number | null; energyUncInvcm: number | null; energyLiteral: string | null } {
  const energyLiteral = readText(given.energy_literal)
  const printed = energyLiteral === null ? null : readPrinted(energyLiteral)
  if (energyLiteral !== null && printed === null) findings.error('literal_malformed', 'energy_literal', 'The printed digits cannot be read as a number; write them as 16973.36619 or 16973.36619(2).')
  const number = readGivenNumber(findings, 'energy_invcm', given.energy_invcm, { max: LARGEST_ENERGY, unit: 'cm^-1' })
  if (printed !== null && number !== null && printed.value !== number) {
    findings.error('literal_differs', 'energy_literal', `The printed digits say ${printed.value} and energy_invcm says ${number}: they must agree, or energy_invcm be left out.`)
  }
  const energyInvcm = number ?? printed?.value ?? null
  if (energyInvcm === null && energyLiteral === null && !isGiven(given.energy_invcm)) findings.error('missing_field', 'energy_invcm', 'The energy is missing: give energy_literal (the digits printed) or energy_invcm.')
  const stated = isGiven(given.energy_unc_invcm) ? readUncertainty(findings, 'energy_unc_invcm', given.energy_unc_invcm) : null
  const bracket = printed?.unc ?? null
  if (stated !== null && bracket !== null && Math.abs(stated - bracket) > 1e-9 * Math.max(stated, bracket)) {
    findings.error('uncertainty_differs', 'energy_unc_invcm', `The bracket after the printed digits says ${bracket} and energy_unc_invcm says ${stated}: they must agree, or one be left out.`)
  }
  return { energyInvcm, energyUncInvcm: isGiven(given.energy_unc_invcm) ? stated : bracket, energyLiteral }
}

function readConfigurationOfLevel(findings: Findings, given: LevelValues, atom: Atom | null): ReadConfiguration | null {
  const text = readText(given.configuration)
  if (text === null) {
    findings.error('missing_field', 'configuration', 'The configuration is missing, such as 2s2.2p2 or 3d6.(5D).4s.4p.(3P*).')
    return null
  }
  const read = readConfiguration(text, atom)
  if (read.ok) return read.value
  findings.error(read.code, 'configuration', read.detail)
  return null
}

/**
 * Reads a level as a curator writes it into the columns of a revision. `row` is null where that cannot be, with errors that say
 * why; findings here are about reading alone, the checks add what physics and the rest of the table say. `atom` is null for a
 * species that is not known.
 */
export function readLevelValues(given: LevelValues, { atom }: { atom: Atom | null }): LevelReading {
  const findings = new Findings()
  checkLengths(findings, 'level', given)
  const configuration = readConfigurationOfLevel(findings, given, atom)
  const momenta = readMomenta(findings, given)
  const energy = readEnergy(findings, given)
  const energySource = readText(given.energy_source)
  if (energySource === null) findings.error('missing_source', 'energy_source', 'The energy needs the key of its source.')
  const energyEvidence = readChoice(findings, 'energy_evidence', given.energy_evidence, Evidence.options, 'missing_evidence', `Say how far the energy was checked against its source: ${Evidence.options.join(', ')}.`)
  const measured = readMeasured(findings, given)
  const chosen = readChosen(findings, given)
  const repeatIndex = readGivenNumber(findings, 'repeat_index', given.repeat_index, { integer: true, min: 1, max: 1000 })
  const parts: LevelParts = { configuration, momenta, ...energy, measured, shortG: isGiven(given.g_j_measured), gChosen: chosen.gChosen }
  if (findings.errors > 0 || configuration === null || momenta === null || energy.energyInvcm === null || energySource === null || energyEvidence === null || measured === null) {
    return { row: null, parts, findings: findings.list }
  }
  const row: LevelRow = {
    configuration: configuration.canonical, ...momenta, repeatIndex, alternativeName: readText(given.alternative_name),
    energyInvcm: energy.energyInvcm, energyUncInvcm: energy.energyUncInvcm, energyLiteral: energy.energyLiteral, energySource, energyEvidence,
    lineChecked: given.line_checked ?? false, note: readText(given.note), status: 'active', retiredReason: null, successor: null, ...chosen, measured,
  }
  return { row, parts, findings: findings.list }
}

/** A level's columns as a curator would write them: every value named, empty ones null. Reading it again gives the same columns. */
export function writeLevelValues(row: LevelRow): LevelValues {
  return {
    configuration: row.configuration,
    coupling: row.coupling,
    term: printLevelTerm(row),
    core: printCore(row),
    l_outer: row.lOuter,
    repeat_index: row.repeatIndex,
    alternative_name: row.alternativeName,
    energy_literal: row.energyLiteral,
    energy_invcm: row.energyInvcm,
    energy_unc_invcm: row.energyUncInvcm,
    energy_source: row.energySource,
    energy_evidence: row.energyEvidence,
    measured_g: row.measured.map(({ value, unc, literal, source, evidence, note }) => ({ value, unc, literal, source, evidence, note })),
    g_j_chosen: row.gChosen,
    g_j_chosen_reason: row.gChosenReason,
    line_checked: row.lineChecked,
    note: row.note,
  }
}
