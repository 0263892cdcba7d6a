import { Evidence } from '@/openapi/schemas/common'
import type { LevelValues, MeasuredGValues } from '@/openapi/schemas/change'
import type { MeasuredGRow } from '../rows'
import type { Findings } from './findings'
import { type GivenNumber, isGiven, readChoice, readGivenNumber, readPrinted, readText, readUncertainty } from './numbers'

interface GivenG { value: GivenNumber; unc: GivenNumber; literal: string | null; source: string | null | undefined; evidence: string | null | undefined; note: string | null | undefined }
/** The names under which the parts of one measured value are given. */
interface Names { value: string; unc: string; literal: string; source: string; evidence: string }

/** The value, from the number or from the digits printed; the bracket after the digits gives the uncertainty where none is stated. */
function readValue(findings: Findings, given: GivenG, names: Names): { value: number | null; unc: number | null; literal: string | null } {
  // digits with their bracket may stand where the number is meant
  const bracketed = typeof given.value === 'string' && given.value.includes('(')
  const literal = given.literal ?? (bracketed ? readText(given.value as string) : null)
  const printed = literal === null ? null : readPrinted(literal)
  if (literal !== null && printed === null) findings.error('literal_malformed', bracketed ? names.value : names.literal, 'The printed digits cannot be read as a number; write them as 1.3342 or 1.3342(2).')
  const number = bracketed ? null : readGivenNumber(findings, names.value, given.value)
  if (printed !== null && number !== null && printed.value !== number) findings.error('literal_differs', names.literal, `The printed digits say ${printed.value} and the number ${number}: they must agree, or one be left out.`)
  const unc = isGiven(given.unc) ? readUncertainty(findings, names.unc, given.unc) : (printed?.unc ?? null)
  return { value: number ?? printed?.value ?? null, unc, literal }
}

function readOne(findings: Findings, given: GivenG, names: Names): MeasuredGRow | null {
  const before = findings.errors
  const { value, unc, literal } = readValue(findings, given, names)
  const source = readText(given.source)
  if (value === null && findings.errors === before) findings.error('missing_field', names.value, 'A measured g_J needs its value.')
  if (source === null) findings.error('missing_source', names.source, 'A measured g_J needs the key of its source.')
  const evidence = readChoice(findings, names.evidence, given.evidence, Evidence.options, 'missing_evidence', `Say how far the measured g_J was checked: ${Evidence.options.join(', ')}.`)
  if (value === null || source === null || evidence === null || findings.errors > before) return null
  return { value, unc, literal, source, evidence, note: readText(given.note) }
}

const SHORT: Names = { value: 'g_j_measured', unc: 'g_j_measured_unc', literal: 'g_j_measured', source: 'g_source', evidence: 'g_evidence' }

const ofList = (given: MeasuredGValues): GivenG => ({ value: given.value, unc: given.unc, literal: readText(given.literal), source: given.source, evidence: given.evidence, note: given.note })

/** All measured g_J of a level, from the list or from the short form for a single one. Null where any cannot be read. */
export function readMeasured(findings: Findings, given: LevelValues): MeasuredGRow[] | null {
  const list = given.measured_g ?? []
  const short = isGiven(given.g_j_measured)
  if (short && list.length > 0) {
    findings.error('measured_g_twice', 'g_j_measured', 'Give the measured g_J either in measured_g or in g_j_measured, not in both.')
    return null
  }
  if (!short) {
    for (const field of ['g_j_measured_unc', 'g_source', 'g_evidence'] as const) {
      if (isGiven(given[field])) findings.error('measured_g_missing', field, `${field} belongs to g_j_measured, which is missing.`)
    }
  }
  const given1: GivenG = { value: given.g_j_measured, unc: given.g_j_measured_unc, literal: null, source: given.g_source, evidence: given.g_evidence, note: null }
  const rows = short
    ? [readOne(findings, given1, SHORT)]
    : list.map((one, at) => readOne(findings, ofList(one), { value: `measured_g.${at}.value`, unc: `measured_g.${at}.unc`, literal: `measured_g.${at}.literal`, source: `measured_g.${at}.source`, evidence: `measured_g.${at}.evidence` }))
  return rows.every((row) => row !== null) ? rows : null
}

/** A curator's choice of g_J: the value with the reason, or neither. */
export function readChosen(findings: Findings, given: LevelValues): { gChosen: number | null; gChosenReason: string | null } {
  const gChosen = readGivenNumber(findings, 'g_j_chosen', given.g_j_chosen)
  const gChosenReason = readText(given.g_j_chosen_reason)
  if (isGiven(given.g_j_chosen) && gChosenReason === null) findings.error('g_reason_missing', 'g_j_chosen_reason', 'A chosen g_J goes before measured and coupled ones: say why.')
  if (!isGiven(given.g_j_chosen) && gChosenReason !== null) findings.error('g_chosen_missing', 'g_j_chosen', 'There is a reason for a chosen g_J and no value: give g_j_chosen, or leave the reason out.')
  return { gChosen, gChosenReason }
}
