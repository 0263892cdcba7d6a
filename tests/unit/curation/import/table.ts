import { shownMeasured } from '@/lib/curation/import/own'
import type { LevelRow, PublishedTable } from '@/lib/curation/rows'
import { printLevelTerm } from '@/lib/curation/values'
import type { Level } from '@/openapi/schemas/level'

const LEVEL: LevelRow = {
  configuration: '3s', coupling: 'LS', label: null, twoS: 1, l: 0, twoJ: 1, twoK: null, coreTwoS: null, coreL: null, coreTwoJ: null, lOuter: null, outerTwoJ: null, parity: 'even',
  repeatIndex: null, alternativeName: null, energyInvcm: 0, energyUncInvcm: null, energyLiteral: null, energySource: 'nist-na', energyEvidence: 'read', lineChecked: false, note: null,
  status: 'active', retiredReason: null, successor: null, gChosen: null, gChosenReason: null, measured: [],
}
const p = (twoJ: number, energyInvcm: number): LevelRow => ({ ...LEVEL, configuration: '3p', l: 1, twoJ, parity: 'odd', energyInvcm })
const g = (value: number, unc: number | null, source: string) => ({ value, unc, literal: null, source, evidence: 'read' as const, note: null })

/** A small table: sodium's first three levels, the last with two measured g_J. */
export const TABLE: PublishedTable = {
  edition: 1,
  species: new Map([['Na-I', { revision: 1, row: { name: 'sodium', element: 'Na', z: 11, charge: 0, coreConfiguration: '[Ne]', ionisationEnergyInvcm: null, ionisationSource: null, ionisationEvidence: null, note: null } }]]),
  isotopes: new Map(),
  sources: new Map(['nist-na', 'bench-na'].map((key) => [key, { revision: 1, row: { citation: key, kind: 'other' as const, authors: null, title: null, journal: null, year: null, doi: null, note: null } }])),
  levels: new Map([
    ['Na-I.1', { revision: 1, row: LEVEL }], ['Na-I.2', { revision: 1, row: p(1, 16956.17025) }],
    ['Na-I.3', { revision: 1, row: { ...p(3, 16973.36619), measured: [g(1.3342, 0.0002, 'nist-na'), g(1.335, null, 'bench-na')] } }],
  ]),
  hyperfine: new Map(),
}

/** A level as the API gives it, as far as an export writes it. */
export function buildLevelForExport(id: string, row: LevelRow, revision: number): Level {
  const shown = shownMeasured(row)
  return {
    id, species: id.slice(0, id.indexOf('.')), configuration: row.configuration, coupling: row.coupling,
    term: { symbol: printLevelTerm({ ...row, label: null }), unicode: '', label: row.label, multiplicity: (row.twoS ?? 0) + 1, s: (row.twoS ?? 0) / 2, l: row.l, j: row.twoJ / 2, parity: row.parity, degeneracy: row.twoJ + 1 },
    energy_invcm: row.energyInvcm, energy_unc_invcm: row.energyUncInvcm, energy_literal: row.energyLiteral,
    g_j: {
      adopted: 1, adopted_unc: null, basis: 'coupled', scheme: 'LS', coupled: 1, coupled_exact: '1', ls: 1, ls_exact: '1', measured: shown?.value ?? null, measured_unc: shown?.unc ?? null,
      measured_source: shown?.source ?? null, measured_evidence: shown?.evidence ?? null, all_measured: [], status: 'ok',
    },
    energy_source: row.energySource, energy_evidence: row.energyEvidence, line_checked: row.lineChecked, repeat_index: row.repeatIndex, alternative_name: row.alternativeName, note: row.note,
    status: row.status, revision,
  }
}
