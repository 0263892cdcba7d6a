import type { JudgedLevel } from '@/lib/atomic/rules'
import type { Coupling, Evidence, Parity } from '@/openapi/schemas/common'
import type { HyperfineConstants, Level, LevelDetail } from '@/openapi/schemas/level'
import type { Source } from '@/openapi/schemas/source'
import type { Isotope, Species } from '@/openapi/schemas/species'

/**
 * What bulk work reads: one typed array per property, index = position of a level in the snapshot.
 * Entries 0 .. size - 1 are the active levels; those that the edition holds as retired follow them.
 * Angular momenta J and S as twice the value.
 */
export interface SnapshotColumns {
  /** Index into `species`. */
  readonly speciesOf: Uint16Array
  readonly energyInvcm: Float64Array
  readonly twoJ: Int16Array
  /** -1 where the coupling has no S. */
  readonly twoS: Int16Array
  /** -1 where the coupling has no L. */
  readonly l: Int16Array
  /** 0 even, 1 odd. */
  readonly parity: Uint8Array
  /** 1 where the level is named in LS coupling. */
  readonly lsNamed: Uint8Array
  /** Adopted g_J; NaN where none is known or J = 0 has none. */
  readonly gAdopted: Float64Array
  /** The number after the dot of the level's id. */
  readonly ordinal: Uint32Array
}

/** Why a level is gone, from the edition that retired it on. */
export interface RetiredLevel {
  readonly reason: string | null
  readonly successor: string | null
  readonly edition: number
}

/** The levels of one LS term: same species, configuration with parents, label, S, L, parity. Indices by J upwards. */
export interface TermMembers {
  readonly indices: readonly number[]
  /** J's that S and L make and the table does not hold, as twice the value. */
  readonly missingTwoJ: readonly number[]
  /** False where a J is missing or the level has no S and L. */
  readonly complete: boolean
}

/**
 * One edition in memory: immutable, complete, and compact. The database is the truth and this is a cache of it.
 * Active levels are ordered by species, then energy, then ordinal, so that within a species the lower of two levels has the smaller index.
 */
export interface Snapshot {
  readonly edition: number
  readonly species: readonly Species[]
  readonly speciesIndex: ReadonlyMap<string, number>
  /** Number of active levels. */
  readonly size: number
  /** Active and retired ones together: the length of the columns. */
  readonly total: number
  readonly columns: SnapshotColumns
  readonly sources: readonly Source[]
  readonly sourceByKey: ReadonlyMap<string, Source>
  /** Rough memory held, for bounding the cache. */
  readonly bytes: number
  /** Half-open range [from, to) of the active levels of a species. */
  speciesRange(species: number): readonly [number, number]
  /** Active levels only. */
  indexOf(levelId: string): number | undefined
  levelId(index: number): string
  retired(levelId: string): RetiredLevel | undefined
  /** The level as the API gives it; built when asked for and kept for a while. Retired ones too. */
  level(index: number): Level
  detail(index: number): Omit<LevelDetail, 'links'>
  hyperfine(index: number): readonly HyperfineConstants[]
  /** What selection rules look at. */
  judged(index: number): JudgedLevel
  termMembers(index: number): TermMembers
  /** Strings of a level without building all of it. */
  configurationOf(index: number): string
  labelOf(index: number): string | null
  couplingOf(index: number): Coupling
  alternativeNameOf(index: number): string | null
  noteOf(index: number): string | null
  energySourceOf(index: number): string
  /** Twice K of a pair-coupled level, else -1. */
  twoKOf(index: number): number
  /** Every source key a level's values rest on: energy and measured g. */
  restsOn(index: number, sourceKey: string): boolean
}

/** One revision of a level as the database keeps it, in force in the edition being read. */
export interface LevelRow {
  readonly speciesId: string
  readonly ordinal: number
  readonly configuration: string
  readonly coupling: Coupling
  readonly label: string | null
  readonly twoS: number | null
  readonly l: number | null
  readonly twoJ: number
  readonly twoK: number | null
  readonly coreTwoS: number | null
  readonly coreL: number | null
  readonly coreTwoJ: number | null
  readonly lOuter: number | null
  readonly twoJOuter: number | null
  readonly parity: Parity
  readonly repeatIndex: number | null
  readonly alternativeName: string | null
  readonly energyInvcm: number
  readonly energyUncInvcm: number | null
  readonly energyLiteral: string | null
  readonly energySource: string
  readonly energyEvidence: Evidence
  readonly lineChecked: boolean
  readonly note: string | null
  readonly status: 'active' | 'retired'
  readonly retiredReason: string | null
  readonly successor: string | null
  /** The edition that published this revision; for a retired level the one that retired it. */
  readonly publishedFrom: number
  readonly revision: number
  readonly gChosen: number | null
  readonly gChosenReason: string | null
}

export interface MeasuredGRow {
  readonly levelId: string
  readonly value: number
  readonly unc: number | null
  readonly source: string
  readonly evidence: Evidence
  readonly note: string | null
}

export interface HyperfineRow extends HyperfineConstants {
  readonly levelId: string
}

/** A species without what is counted from its levels. */
export interface SpeciesRow extends Omit<Species, 'level_count' | 'isotopes' | 'isotope_abundance_sum_percent' | 'sources'> {
  readonly isotopes: readonly Isotope[]
}

/** Everything that an edition holds, as read from the database in one go. */
export interface EditionContent {
  readonly edition: number
  /** In the order of their ordinals. */
  readonly species: readonly SpeciesRow[]
  readonly levels: readonly LevelRow[]
  readonly measuredG: readonly MeasuredGRow[]
  readonly hyperfine: readonly HyperfineRow[]
  readonly sources: readonly Omit<Source, 'used_by'>[]
}
