import type { Coupling, Evidence, Parity } from '@/openapi/schemas/common'
import type { ChangeAction, ChangeKind, Finding } from '@/openapi/schemas/change'
import type { Source } from '@/openapi/schemas/source'

/**
 * Values as the table keeps them, by kind: what the column `row` of a change holds once it could be read, and what publishing
 * writes into a revision. Angular momenta are twice their value.
 */
export interface MeasuredGRow { value: number; unc: number | null; literal: string | null; source: string; evidence: Evidence; note: string | null }

export interface LevelRow {
  configuration: string
  coupling: Coupling
  label: string | null
  twoS: number | null
  l: number | null
  twoJ: number
  twoK: number | null
  coreTwoS: number | null
  coreL: number | null
  coreTwoJ: number | null
  lOuter: number | null
  outerTwoJ: number | null
  parity: Parity
  repeatIndex: number | null
  alternativeName: string | null
  energyInvcm: number
  energyUncInvcm: number | null
  energyLiteral: string | null
  energySource: string
  energyEvidence: Evidence
  lineChecked: boolean
  note: string | null
  status: 'active' | 'retired'
  retiredReason: string | null
  successor: string | null
  gChosen: number | null
  gChosenReason: string | null
  /** All of the level's measured g_J; they have rows of their own in the database. */
  measured: MeasuredGRow[]
}

export interface SourceRow { citation: string; kind: Source['kind']; authors: string | null; title: string | null; journal: string | null; year: number | null; doi: string | null; note: string | null }
export interface SpeciesRow { name: string; element: string; z: number; charge: number; coreConfiguration: string; ionisationEnergyInvcm: number | null; ionisationSource: string | null; ionisationEvidence: Evidence | null; note: string | null }
export interface IsotopeRow { massU: number | null; twoI: number | null; abundancePercent: number | null; gI: number | null; source: string; evidence: Evidence; note: string | null }
export interface HyperfineRow { aMhz: number | null; aUncMhz: number | null; bMhz: number | null; bUncMhz: number | null; source: string; evidence: Evidence; note: string | null }

export interface RowOf { level: LevelRow; source: SourceRow; species: SpeciesRow; isotope: IsotopeRow; hyperfine: HyperfineRow }
export type AnyRow = RowOf[ChangeKind]

/** A published thing: its values in the edition read, and the revision that holds them. */
export interface Published<R> { revision: number; row: R }

/** What an edition holds of some species (or of all), with every value that a change can touch. Sources are always all there. */
export interface PublishedTable {
  edition: number
  species: Map<string, Published<SpeciesRow>>
  /** By `Na-I/23`. */
  isotopes: Map<string, Published<IsotopeRow>>
  sources: Map<string, Published<SourceRow>>
  /** By id; retired ones too. */
  levels: Map<string, Published<LevelRow>>
  /** By `Na-I.3/23`. */
  hyperfine: Map<string, Published<HyperfineRow>>
}

/** What a check looks at: one change as it is stored. */
export interface ChangeInput {
  id: string
  kind: ChangeKind
  action: ChangeAction
  subject: string
  speciesId: string | null
  given: unknown
  reason: string | null
  successor: string | null
}

/** What a check finds: the change read into columns (null where it cannot be), and all that is to be said about it. */
export interface Checked { row: AnyRow | null; findings: Finding[] }
