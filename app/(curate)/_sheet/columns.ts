import type { Coupling, Evidence } from '@/openapi/schemas/common'
import { isRecord, type Values } from './change-state'

/** Which choices a cell offers while it is edited; other text may be typed all the same, and is found wrong. */
export type Offers = 'sources' | readonly string[]

export const COUPLINGS = ['LS', 'J1K', 'jj', 'unassigned'] as const satisfies readonly Coupling[]
export const EVIDENCE = ['read', 'quoted', 'recalled', 'computed'] as const satisfies readonly Evidence[]

export interface SheetColumn {
  id: string
  label: string
  unit?: string
  /** What belongs here, for the column's heading and for screen readers. */
  hint: string
  width: number
  align?: 'right'
  set?: 'configuration' | 'term'
  offers?: Offers
  /** Out of sight until it is asked for. */
  spare?: boolean
  /** Names that findings give to this value. */
  fields: readonly string[]
  read: (values: Values) => string
  write: (values: Values, text: string) => Values
}

export const cellText = (value: unknown): string => (value === null || value === undefined ? '' : typeof value === 'object' ? JSON.stringify(value) : String(value))
const given = (text: string): string | null => (text.trim() === '' ? null : text)

const plain = (field: string) => ({
  fields: [field],
  read: (values: Values) => cellText(values[field]),
  write: (values: Values, text: string): Values => ({ ...values, [field]: given(text) }),
})

const SHORT_G: Record<string, string> = { value: 'g_j_measured', unc: 'g_j_measured_unc', source: 'g_source', evidence: 'g_evidence' }

/** All measured g_J of a row, those written in the short form too. */
export function measuredG(values: Values): Record<string, unknown>[] {
  const list = Array.isArray(values.measured_g) ? values.measured_g.filter(isRecord) : []
  if (list.length > 0) return list
  const short = Object.entries(SHORT_G).flatMap(([name, field]) => (values[field] === null || values[field] === undefined ? [] : [[name, values[field]] as const]))
  return short.length > 0 ? [Object.fromEntries(short)] : []
}

export function withMeasuredG(values: Values, list: readonly Record<string, unknown>[]): Values {
  const rest: Record<string, unknown> = { ...values }
  for (const field of Object.values(SHORT_G)) delete rest[field]
  const kept = list.filter((item) => Object.values(item).some((value) => value !== null && value !== undefined && value !== ''))
  return { ...rest, measured_g: kept.length === 0 ? null : kept }
}

/** A column of the first measured g_J; a level that has several shows the others beside the table. */
const firstG = (member: 'value' | 'unc' | 'source' | 'evidence') => ({
  fields: member === 'value' ? ['measured_g', 'g_j_measured', 'g_j', 'measured_g.0.value', 'measured_g.0.literal'] : [SHORT_G[member] ?? member, `measured_g.0.${member}`],
  read: (values: Values) => {
    const first = measuredG(values)[0]
    return first === undefined ? '' : cellText(member === 'value' ? (first.literal ?? first.value) : first[member])
  },
  write: (values: Values, text: string): Values => {
    const [first = {}, ...others] = measuredG(values)
    return withMeasuredG(values, [member === 'value' ? { ...first, value: given(text), literal: given(text) } : { ...first, [member]: given(text) }, ...others])
  },
})

const YES = ['yes', 'no'] as const

export const COLUMNS: readonly SheetColumn[] = [
  { id: 'configuration', label: 'Configuration', hint: 'Open shells in order, such as 3d6.(5D).4s.4p.(3P*)', width: 168, set: 'configuration', ...plain('configuration') },
  { id: 'coupling', label: 'Coupling', hint: 'LS, J1K, jj or unassigned', width: 88, offers: COUPLINGS, ...plain('coupling') },
  { id: 'term', label: 'Term', hint: 'With J, label before it where there is one: 2P*3/2, z5P*2', width: 96, set: 'term', ...plain('term') },
  {
    id: 'energy', label: 'Energy', unit: 'cm⁻¹', hint: 'The digits the source printed', width: 136, align: 'right', fields: ['energy_literal', 'energy_invcm', 'energy'],
    read: (values) => cellText(values.energy_literal ?? values.energy_invcm),
    // the number follows from the digits
    write: (values, text) => ({ ...values, energy_literal: given(text), energy_invcm: null }),
  },
  { id: 'energy_unc', label: 'Uncertainty', unit: 'cm⁻¹', hint: 'One standard deviation; empty is unknown', width: 104, align: 'right', ...plain('energy_unc_invcm') },
  { id: 'energy_source', label: 'Source', hint: 'Key of the source of the energy', width: 178, offers: 'sources', ...plain('energy_source') },
  { id: 'energy_evidence', label: 'Evidence', hint: 'How far the energy was checked against its source', width: 98, offers: EVIDENCE, ...plain('energy_evidence') },
  { id: 'g', label: 'Measured g', hint: 'Measured Landé factor of the level', width: 112, align: 'right', ...firstG('value') },
  { id: 'g_unc', label: 'Uncertainty of g', hint: 'One standard deviation; empty is unknown', width: 116, align: 'right', ...firstG('unc') },
  { id: 'g_source', label: 'Source of g', hint: 'Key of the source of the measured g', width: 178, offers: 'sources', ...firstG('source') },
  { id: 'g_evidence', label: 'Evidence of g', hint: 'How far the measured g was checked', width: 108, offers: EVIDENCE, ...firstG('evidence') },
  { id: 'note', label: 'Note', hint: 'Remark that is published with the level', width: 260, ...plain('note') },
  { id: 'repeat_index', label: 'Repeat index', hint: 'Counts terms of the same name', width: 108, align: 'right', spare: true, ...plain('repeat_index') },
  { id: 'alternative_name', label: 'Also called', hint: 'Such as the Paschen name 1s5', width: 100, spare: true, ...plain('alternative_name') },
  { id: 'core', label: 'Core term', hint: 'J1K and jj coupling: term of the core with its J', width: 96, set: 'term', spare: true, ...plain('core') },
  { id: 'l_outer', label: 'Outer l', hint: 'J1K and jj coupling: l of the outer electron', width: 80, align: 'right', spare: true, ...plain('l_outer') },
  { id: 'g_chosen', label: 'Chosen g', hint: 'Goes before measured and coupled g, with a reason', width: 100, align: 'right', spare: true, ...plain('g_j_chosen') },
  { id: 'g_chosen_reason', label: 'Reason of chosen g', hint: 'Why this g was chosen', width: 220, spare: true, ...plain('g_j_chosen_reason') },
  {
    id: 'line_checked', label: 'Line checked', hint: 'Yes where a well-known wavelength is reproduced to 0.01 nm', width: 110, offers: YES, spare: true, fields: ['line_checked'],
    read: (values) => (values.line_checked === true ? 'yes' : values.line_checked === false ? 'no' : cellText(values.line_checked)),
    write: (values, text) => ({ ...values, line_checked: /^(y|yes|true|1)$/i.test(text.trim()) ? true : /^(n|no|false|0)$/i.test(text.trim()) ? false : null }),
  },
]

export const columnById = (id: string): SheetColumn | undefined => COLUMNS.find((column) => column.id === id)
/** The column that a finding or a difference is about. */
export const columnOfField = (field: string | null): SheetColumn | undefined =>
  field === null ? undefined : (COLUMNS.find((column) => column.fields.includes(field)) ?? COLUMNS.find((column) => column.fields.some((name) => field.startsWith(`${name}.`))))

const FIELD_WORDS: Record<string, string> = {
  energy_literal: 'Energy as printed', energy_invcm: 'Energy', measured_g: 'Measured g', g_j_measured: 'Measured g', status: 'State',
  citation: 'Reference in full', kind: 'Kind', authors: 'Authors', title: 'Title', journal: 'Journal', year: 'Year', doi: 'DOI', name: 'Name',
  core_configuration: 'Core configuration', ionisation_energy_invcm: 'Ionisation energy', ionisation_source: 'Source of ionisation energy', ionisation_evidence: 'Evidence of ionisation energy',
  mass_u: 'Mass', nuclear_spin: 'Nuclear spin', abundance_percent: 'Abundance', g_i: 'Nuclear g', source: 'Source', evidence: 'Evidence',
  a_mhz: 'A', a_unc_mhz: 'Uncertainty of A', b_mhz: 'B', b_unc_mhz: 'Uncertainty of B', reason: 'Reason', successor: 'Successor', comment: 'Comment', label: 'Label',
}
/** Name of a value in words of the page. */
export const fieldWords = (field: string): string => FIELD_WORDS[field] ?? columnOfField(field)?.label ?? field.replace(/_/g, ' ')
