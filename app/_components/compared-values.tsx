import type { FieldDifference } from '@/openapi/schemas/change'
import { Configuration } from './configuration'
import { Quantity } from './quantity'
import { SourceRef } from './source-ref'
import { TermSymbol } from './term-symbol'

/** Names of values as a reader knows them. What is not here is told by its name with spaces. */
const WORDS: Record<string, string> = {
  'term.symbol': 'Term', 'term.label': 'Label of the term', energy_invcm: 'Energy', energy_unc_invcm: 'Uncertainty of the energy', energy_literal: 'Digits of the source', energy_source: 'Source of the energy',
  energy_evidence: 'Evidence of the energy', 'g_j.adopted': 'Landé factor adopted', 'g_j.measured': 'Landé factor measured', 'g_j.measured_unc': 'Its uncertainty', 'g_j.measured_source': 'Its source',
  'g_j.all_measured': 'All measured Landé factors', 'g_j.basis': 'Basis of the Landé factor', 'g_j.chosen_reason': 'Why it was chosen', line_checked: 'Checked by a wavelength', ionisation_energy_invcm: 'Ionisation energy',
  core_configuration: 'Core', mass_u: 'Mass', nuclear_spin: 'Nuclear spin', abundance_percent: 'Abundance', g_i: 'g of the nucleus', a_mhz: 'A', a_unc_mhz: 'Uncertainty of A', b_mhz: 'B', b_unc_mhz: 'Uncertainty of B', doi: 'DOI',
}
const UNITS: Record<string, string> = { invcm: 'cm⁻¹', mhz: 'MHz', u: 'u', percent: '%' }
const SHOWN_OF_G = new Set(['adopted', 'measured', 'measured_unc', 'measured_source', 'all_measured', 'basis', 'chosen_reason'])

const fieldWords = (field: string): string => WORDS[field] ?? field.replaceAll(/[._]/g, ' ').replace(/^./, (first) => first.toUpperCase())
const unitOf = (field: string): string | undefined => UNITS[/_([a-z]+)$/.exec(field)?.[1] ?? '']

/** Values that follow from another one (the numbers in a term symbol, the coupled Landé factor) say nothing of their own. */
const tells = (field: string): boolean =>
  field.startsWith('term.') ? field === 'term.symbol' || field === 'term.label' : field.startsWith('g_j.') ? SHOWN_OF_G.has(field.slice(4)) : true

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null && !Array.isArray(value)

function measuredText(item: unknown): string {
  if (!isRecord(item)) return String(item)
  const unc = item.unc === null || item.unc === undefined ? '' : ` ± ${String(item.unc)}`
  return `${String(item.value)}${unc}, ${String(item.source)} (${String(item.evidence)})`
}

/** One value, set as the trade prints it. */
function Value({ field, value }: { field: string; value: unknown }) {
  if (value === null || value === undefined || value === '' || (Array.isArray(value) && value.length === 0)) return <span className="text-muted">nothing</span>
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  if (Array.isArray(value)) return <>{value.map((item, at) => <span key={at} className="block">{measuredText(item)}</span>)}</>
  if (typeof value === 'number') return <Quantity value={value} digits={12} {...(unitOf(field) === undefined ? {} : { unit: unitOf(field) })} />
  const text = isRecord(value) ? JSON.stringify(value) : String(value)
  if (field === 'term.symbol') return <TermSymbol term={text} />
  if (field === 'configuration' || field === 'core_configuration') return <Configuration text={text} />
  if (field === 'source' || field.endsWith('_source')) return <SourceRef source={text} />
  return <span className="[overflow-wrap:anywhere]">{text}</span>
}

/** What differs, value by value, before and after; of an energy also by how much. */
export function ComparedValues({ fields, onlyAfter = false }: { fields: readonly FieldDifference[]; onlyAfter?: boolean }) {
  const shown = fields.filter(({ field, after }) => tells(field) && !(onlyAfter && (after === null || after === false)))
  if (shown.length === 0) return <span className="text-muted">{fields.length === 0 ? 'nothing differs' : 'only values that follow from others'}</span>
  return (
    <dl className="grid min-w-52 max-w-[46rem] gap-y-0.5 [&_a]:inline-flex [&_a]:min-h-6 [&_a]:items-center">
      {shown.map(({ field, before, after }) => (
        <div key={field} className="grid gap-x-4 sm:grid-cols-[11rem_minmax(0,1fr)]">
          <dt className="text-muted">{fieldWords(field)}</dt>
          <dd className="flex flex-wrap items-baseline gap-x-2">
            {onlyAfter ? null : <><del className="text-muted no-underline"><span className="sr-only">before: </span><Value field={field} value={before} /></del><span aria-hidden="true" className="text-muted">→</span></>}
            <ins className="no-underline">{onlyAfter ? null : <span className="sr-only">after: </span>}<Value field={field} value={after} /></ins>
            {!onlyAfter && typeof before === 'number' && typeof after === 'number' && field.endsWith('_invcm') ? <span className="note">(<Quantity value={after - before} sign digits={6} />)</span> : null}
          </dd>
        </div>
      ))}
    </dl>
  )
}
