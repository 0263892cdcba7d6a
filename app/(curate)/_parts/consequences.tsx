'use client'
import Link from 'next/link'
import type { Consequences, LineConsequence } from '@/openapi/schemas/change'
import { DataTable, type Column } from '../../_components/data-table'
import { linePage } from '../../_components/names'
import { fixed, plural, significant } from '../../_components/number'

const EFFECT: Record<LineConsequence['effect'], string> = { moved: 'moves', g_changed: 'g changes', new: 'new line', gone: 'no longer there' }

/** In words: how many lines do what. */
export function consequencesText({ counts, edition }: Consequences): string {
  const parts = [
    counts.moved > 0 ? `${plural(counts.moved, 'line')} ${counts.moved === 1 ? 'moves' : 'move'}` : '',
    counts.g_changed > 0 ? `${plural(counts.g_changed, 'line')} ${counts.g_changed === 1 ? 'has' : 'have'} another g only` : '',
    counts.new > 0 ? `${plural(counts.new, 'line')} ${counts.new === 1 ? 'is' : 'are'} new` : '',
    counts.gone > 0 ? `${plural(counts.gone, 'line')} ${counts.gone === 1 ? 'goes' : 'go'} away` : '',
  ].filter((part) => part !== '')
  return parts.length === 0 ? `No line of edition ${edition} moves, and no effective g changes.` : `${parts.join(', ')}, against edition ${edition}.`
}

const shift = (value: number | null, digits = 3) => (value === null ? null : `${value > 0 ? '+' : ''}${significant(value, digits)}`)
/** From where to where; alone where there is no other end. */
const arrow = (before: string | null, after: string | null) => (
  <span className="num whitespace-nowrap">{before === null || after === null ? (before ?? after) : <>{before} <span className="text-muted">→</span> {after}</>}</span>
)
const wavelength = (value: number | null): string | null => (value === null ? null : fixed(value, value < 30_000 ? 5 : 2))
const MEDIUM = { air: 'in air', vacuum: 'in vacuum' } as const
/** The medium of both wavelengths; of each where a line passes from one into the other. */
const medium = ({ medium_before: before, medium_after: after }: LineConsequence): string =>
  before !== null && after !== null && before !== after ? `${MEDIUM[before]} → ${MEDIUM[after]}` : MEDIUM[after ?? before ?? 'vacuum']
const g = (value: number | null): string | null => (value === null ? null : fixed(value, 5))

const COLUMNS: Column<LineConsequence>[] = [
  {
    name: 'transition', header: 'Line', rowHeader: true, value: (line) => line.transition, sort: true,
    cell: (line) => (line.effect === 'new' ? <code className="text-xs">{line.transition}</code> : <Link className="link" href={linePage(line.transition)} prefetch={false}><code className="text-xs">{line.transition}</code></Link>),
  },
  { name: 'effect', header: 'Effect', value: (line) => EFFECT[line.effect], sort: true },
  { name: 'wavelength_before_nm', header: 'Before', only: 'copy', value: (line) => line.wavelength_before_nm },
  { name: 'wavelength_after_nm', header: 'Wavelength, nm', value: (line) => line.wavelength_after_nm, sort: true, cell: (line) => <>{arrow(wavelength(line.wavelength_before_nm), wavelength(line.wavelength_after_nm))} <span className="text-xs whitespace-nowrap text-muted">{medium(line)}</span></> },
  { name: 'medium_before', header: 'Medium before', only: 'copy', value: (line) => line.medium_before },
  { name: 'medium_after', header: 'Medium', only: 'copy', value: (line) => line.medium_after },
  { name: 'shift_pm', header: 'Shift, pm', align: 'right', value: (line) => line.shift_pm, sort: (line) => (line.shift_pm === null ? null : Math.abs(line.shift_pm)), cell: (line) => <span className="num">{shift(line.shift_pm) ?? ''}</span> },
  { name: 'shift_invcm', header: <>Shift, cm<sup>−1</sup></>, align: 'right', value: (line) => line.shift_invcm, cell: (line) => <span className="num">{shift(line.shift_invcm) ?? ''}</span> },
  { name: 'g_eff_before', header: 'g before', only: 'copy', value: (line) => line.g_eff_before },
  {
    name: 'g_eff_after', header: <>g<sub>eff</sub></>, value: (line) => line.g_eff_after,
    cell: (line) => (g(line.g_eff_before) === g(line.g_eff_after) ? <span className="num text-muted">{g(line.g_eff_after) ?? ''}</span> : arrow(g(line.g_eff_before), g(line.g_eff_after))),
  },
]

/** The same in a narrow place: one line below the other. */
function Narrow({ lines, caption }: { lines: readonly LineConsequence[]; caption: string }) {
  return (
    <ul aria-label={caption} className="border-t border-rule text-sm">
      {lines.map((line) => (
        <li key={`${line.transition} ${line.kind}`} className="border-b border-rule py-1.5">
          <div className="flex flex-wrap items-baseline justify-between gap-x-3">
            {line.effect === 'new' ? <code className="text-xs">{line.transition}</code> : <Link className="link font-mono text-xs" href={linePage(line.transition)} prefetch={false}>{line.transition}</Link>}
            <span className="text-xs text-muted">{EFFECT[line.effect]}</span>
          </div>
          <p>{arrow(wavelength(line.wavelength_before_nm), wavelength(line.wavelength_after_nm))} <span className="text-muted">nm {medium(line)}</span></p>
          <p className="note num">
            {[line.shift_pm === null ? '' : `${shift(line.shift_pm)} pm`, line.shift_invcm === null ? '' : `${shift(line.shift_invcm)} cm⁻¹`].filter((part) => part !== '').join(', ')}
            {g(line.g_eff_before) === g(line.g_eff_after) || line.effect === 'gone' ? null : <>{line.shift_pm === null ? '' : ', '}g<sub>eff</sub> {arrow(g(line.g_eff_before), g(line.g_eff_after))}</>}
          </p>
        </li>
      ))}
    </ul>
  )
}

/** The lines that a change moves, from where to where. */
export function ConsequencesView({ consequences, caption, narrow = false }: { consequences: Consequences; caption: string; narrow?: boolean }) {
  const { lines, complete } = consequences
  return (
    <div>
      <p className="mb-2 text-sm">{consequencesText(consequences)}</p>
      {narrow ? (lines.length > 0 ? <Narrow lines={lines.slice(0, 20)} caption={caption} /> : null) : lines.length === 0 ? null : <DataTable columns={COLUMNS} rows={lines} rowKey={(line) => `${line.transition} ${line.kind}`} caption={caption} hideCaption summary={complete ? undefined : `the ${lines.length} that move most`} />}
    </div>
  )
}
