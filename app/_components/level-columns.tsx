'use client'
import Link from 'next/link'
import type { Level } from '@/openapi/schemas/level'
import { Configuration } from './configuration'
import type { Column } from './data-table'
import { Evidence } from './evidence'
import { levelPage, speciesPage, speciesText } from './names'
import { decimalsOf, fixed } from './number'
import { TermSymbol } from './term-symbol'

/** Adopted g_J with where it comes from; the exact fraction where the coupling gives one. */
export function GCell({ level }: { level: Level }) {
  const { adopted, basis, coupled_exact: exact, status } = level.g_j
  if (adopted === null) return <span className="text-muted">{status === 'not_applicable' ? 'none: J = 0' : 'not known'}</span>
  return (
    <span className="num" title={`${adopted}`}>
      {fixed(adopted, basis === 'coupled' ? 5 : Math.min(5, decimalsOf(adopted)))}
      <span className="ml-1.5 inline-block w-[5.5em] text-left text-xs text-muted">{basis === 'coupled' ? (exact ? `≈ ${exact}` : 'coupled') : basis}</span>
    </span>
  )
}

/** Columns of a list of levels. `href` adds the pinned edition to addresses. */
export function levelColumns(href: (path: string) => string, options: { species?: boolean; id?: boolean; named?: boolean } = {}): Column<Level>[] {
  const { species = true, id = true, named = false } = options
  const columns: Column<Level>[] = [
    {
      name: 'species', header: 'Species', value: (level) => level.species, sort: true,
      cell: (level) => <Link className="link" href={href(speciesPage(level.species))}>{speciesText(level.species)}</Link>,
    },
    { name: 'configuration', header: 'Configuration', value: (level) => level.configuration, sort: true, cell: (level) => <Configuration text={level.configuration} /> },
    {
      name: 'term', header: 'Term', rowHeader: true, value: (level) => level.term.symbol,
      sort: (level) => `${level.term.multiplicity ?? 0} ${level.term.l ?? 0} ${level.term.symbol}`,
      cell: (level) => (
        <Link className="link inline-flex min-h-6 items-center" href={href(levelPage(level.id))}>
          <TermSymbol term={level.term} />
        </Link>
      ),
    },
    { name: 'label', header: 'Label', value: (level) => level.term.label, only: 'copy' },
    { name: 'alternative_name', header: 'Also called', value: (level) => level.alternative_name, only: named ? undefined : 'copy', cell: (level) => level.alternative_name ?? '' },
    { name: 'j', header: 'J', value: (level) => level.term.j, only: 'copy' },
    {
      name: 'energy_invcm', header: <>Energy, cm<sup>−1</sup></>, align: 'right', value: (level) => level.energy_invcm, sort: true,
      cell: (level) => <span title={`${level.energy_invcm}`}>{fixed(level.energy_invcm, decimalsOf(level.energy_invcm))}</span>,
    },
    { name: 'energy_unc_invcm', header: 'Uncertainty', value: (level) => level.energy_unc_invcm, only: 'copy' },
    { name: 'g_j', header: <>g<sub>J</sub></>, align: 'right', value: (level) => level.g_j.adopted, sort: true, cell: (level) => <GCell level={level} /> },
    { name: 'g_basis', header: 'Basis of g', value: (level) => level.g_j.basis, only: 'copy' },
    { name: 'energy_evidence', header: 'Evidence', value: (level) => level.energy_evidence, cell: (level) => <Evidence grade={level.energy_evidence} /> },
    { name: 'level', header: 'Id', value: (level) => level.id, only: id ? undefined : 'copy', cell: (level) => <code className="text-xs text-muted">{level.id}</code> },
  ]
  return species ? columns : columns.filter((column) => column.name !== 'species')
}
