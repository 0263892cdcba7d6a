'use client'
import Link from 'next/link'
import type { Level } from '@/openapi/schemas/level'
import type { Transition } from '@/openapi/schemas/transition'
import { Configuration } from './configuration'
import type { Column } from './data-table'
import { levelPage, linePage, speciesPage, speciesText } from './names'
import { fixed, significant } from './number'
import { TermSymbol } from './term-symbol'

export type Shown = 'conventional' | 'air' | 'vacuum' | 'wavenumber' | 'frequency'

/** A wavelength keeps three decimals in the optical, fewer in the far infrared, where the table's own figures end sooner. */
export const nm = (value: number): string => (value < 1e6 ? fixed(value, value < 3000 ? 4 : value < 30000 ? 3 : 1) : significant(value, 6))

const POSITION: Record<Shown, Omit<Column<Transition>, 'rowHeader' | 'cell'> & { print: (line: Transition) => string | null }> = {
  conventional: {
    name: 'wavelength_conventional_nm', header: 'Wavelength, nm', align: 'right', value: (line) => line.wavelength_conventional_nm, print: (line) => nm(line.wavelength_conventional_nm),
  },
  air: { name: 'wavelength_air_nm', header: 'Wavelength in air, nm', align: 'right', value: (line) => line.wavelength_air_nm, print: (line) => (line.wavelength_air_nm === null ? null : nm(line.wavelength_air_nm)) },
  vacuum: { name: 'wavelength_vac_nm', header: 'Wavelength in vacuum, nm', align: 'right', value: (line) => line.wavelength_vac_nm, print: (line) => nm(line.wavelength_vac_nm) },
  wavenumber: { name: 'wavenumber_invcm', header: <>Wavenumber, cm<sup>−1</sup></>, align: 'right', value: (line) => line.wavenumber_invcm, print: (line) => fixed(line.wavenumber_invcm, 4) },
  frequency: { name: 'frequency_thz', header: 'Frequency, THz', align: 'right', value: (line) => line.frequency_thz, print: (line) => fixed(line.frequency_thz, 6) },
}

/** LS terms as `²S – ²P°`; the J's stand in the symbols. */
export function Terms({ line }: { line: Transition }) {
  return (
    <span className="whitespace-nowrap">
      <TermSymbol term={line.lower.term} />
      <span aria-hidden="true" className="mx-1 text-muted">–</span>
      <span className="sr-only"> to </span>
      <TermSymbol term={line.upper.term} />
    </span>
  )
}

function End({ level, href }: { level: Level; href: (path: string) => string }) {
  return (
    <Link className="inline-flex min-h-6 items-baseline gap-2 hover:text-lamp-ink" href={href(levelPage(level.id))}>
      <Configuration text={level.configuration} className="text-muted" />
      <TermSymbol term={level.term} />
    </Link>
  )
}

/** Columns of a list of lines, positioned by the quantity asked for. */
export function lineColumns(href: (path: string) => string, options: { species?: boolean; shown?: Shown; sortable?: boolean; full?: boolean } = {}): Column<Transition>[] {
  const { species = true, shown = 'conventional', sortable = true, full = false } = options
  const { print, ...position } = POSITION[shown]
  const others = (['wavelength_vac_nm', 'wavelength_air_nm', 'wavenumber_invcm'] as const).filter((name) => name !== position.name)
  const columns: Column<Transition>[] = [
    {
      name: 'species', header: 'Species', value: (line) => line.lower.species, sort: sortable,
      cell: (line) => <Link className="link" href={href(speciesPage(line.lower.species))}>{speciesText(line.lower.species)}</Link>,
    },
    {
      ...position, rowHeader: true, sort: sortable,
      cell: (line) => (
        <Link className="link inline-flex min-h-6 items-center" href={href(linePage(line.id))}>
          {print(line) ?? 'no air value'}
          {shown === 'conventional' ? <span className="ml-1 inline-block w-[1.6em] text-left text-xs text-muted no-underline">{line.conventional_medium === 'vacuum' ? 'vac' : 'air'}</span> : null}
        </Link>
      ),
    },
    ...others.map((name): Column<Transition> => ({
      name, header: name === 'wavenumber_invcm' ? <>Wavenumber, cm<sup>−1</sup></> : name, align: 'right', value: (line) => line[name],
      only: full && name === 'wavenumber_invcm' ? undefined : 'copy', cell: (line) => fixed(line.wavenumber_invcm, 4),
    })),
    ...(full
      ? (['lower', 'upper'] as const).map((end): Column<Transition> => ({
          name: `${end}_level`, header: end === 'lower' ? 'Lower level' : 'Upper level', value: (line) => line[end].id, cell: (line) => <End level={line[end]} href={href} />, only: 'screen',
        }))
      : [{ name: 'terms', header: 'Lower – upper', value: (line: Transition) => `${line.lower.term.symbol} - ${line.upper.term.symbol}`, cell: (line: Transition) => <Terms line={line} />, only: 'screen' as const }]),
    ...(['lower', 'upper'] as const).flatMap((end): Column<Transition>[] => [
      { name: end, header: end, value: (line) => line[end].id, only: 'copy' },
      { name: `${end}_configuration`, header: `${end} configuration`, value: (line) => line[end].configuration, only: 'copy' },
      { name: `${end}_term`, header: `${end} term`, value: (line) => line[end].term.symbol, only: 'copy' },
    ]),
    {
      name: 'kind', header: 'Kind', value: (line) => line.kind,
      cell: (line) => (
        <>
          {line.kind}
          {line.verdict.intercombination ? <span className="ml-1.5 text-xs text-warn">intercombination</span> : null}
        </>
      ),
    },
    {
      name: 'g_eff', header: <>g<sub>eff</sub></>, align: 'right', value: (line) => line.g_eff, sort: sortable,
      cell: (line) => (line.g_eff === null ? <span className="text-muted">{line.g_eff_status === 'not_applicable' ? 'does not apply' : 'not known'}</span> : <span title={`${line.g_eff}`}>{fixed(line.g_eff, 4)}</span>),
    },
    { name: 'pattern', header: 'Pattern', value: (line) => line.pattern, cell: (line) => line.pattern ?? <span className="text-muted">not known</span> },
  ]
  return species ? columns : columns.filter((column) => column.name !== 'species')
}
