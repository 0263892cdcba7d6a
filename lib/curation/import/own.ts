import { orderMeasured } from '@/lib/atomic/adopted'
import type { LevelRow, MeasuredGRow } from '../rows'
import { printLevelTerm } from '../values'

/** The measured g_J that an export shows of several. */
export const shownMeasured = (row: Pick<LevelRow, 'measured'>): MeasuredGRow | null => orderMeasured(row.measured)[0] ?? null

const half = (two: number | null): number | null => (two === null ? null : two / 2)
type Own = string | number | boolean | null

/** What an export of the level writes into a column; the cells of a file are compared with it. */
const OWN: Record<string, (row: LevelRow) => Own> = {
  configuration: (row) => row.configuration,
  coupling: (row) => row.coupling,
  term: (row) => printLevelTerm({ ...row, label: null }),
  label: (row) => row.label,
  multiplicity: (row) => (row.coupling === 'LS' ? (row.twoS ?? 0) + 1 : null),
  s: (row) => (row.coupling === 'LS' ? half(row.twoS) : null),
  l: (row) => (row.coupling === 'LS' ? row.l : null),
  k: (row) => (row.coupling === 'J1K' ? half(row.twoK) : null),
  core_s: (row) => (hasCore(row) ? half(row.coreTwoS) : null),
  core_l: (row) => (hasCore(row) ? row.coreL : null),
  core_j: (row) => (hasCore(row) ? half(row.coreTwoJ) : null),
  l_outer: (row) => row.lOuter,
  j_outer: (row) => (row.coupling === 'jj' ? half(row.outerTwoJ) : null),
  j: (row) => half(row.twoJ),
  parity: (row) => row.parity,
  degeneracy: (row) => row.twoJ + 1,
  energy_invcm: (row) => row.energyInvcm,
  energy_unc_invcm: (row) => row.energyUncInvcm,
  energy_literal: (row) => row.energyLiteral,
  energy_source: (row) => row.energySource,
  energy_evidence: (row) => row.energyEvidence,
  g_j_measured: (row) => shownMeasured(row)?.value ?? null,
  g_j_measured_unc: (row) => shownMeasured(row)?.unc ?? null,
  g_source: (row) => shownMeasured(row)?.source ?? null,
  g_evidence: (row) => shownMeasured(row)?.evidence ?? null,
  g_j_chosen: (row) => row.gChosen,
  g_j_chosen_reason: (row) => row.gChosenReason,
  line_checked: (row) => row.lineChecked,
  repeat_index: (row) => row.repeatIndex,
  alternative_name: (row) => row.alternativeName,
  note: (row) => row.note,
  status: (row) => row.status,
}

const hasCore = (row: LevelRow): boolean => row.coreTwoS !== null && row.coreL !== null && row.coreTwoJ !== null

export const ownOf = (row: LevelRow, column: string): Own => OWN[column]?.(row) ?? null
