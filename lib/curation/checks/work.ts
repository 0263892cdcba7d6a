import type { AnyRow, ChangeInput, Checked, HyperfineRow, IsotopeRow, LevelRow, Published, PublishedTable, SpeciesRow } from '../rows'
import type { Findings, LevelParts } from '../values'

/** One change while it is being checked. */
export interface Work {
  change: ChangeInput
  findings: Findings
  row: AnyRow | null
  /** What the edition holds of the subject. */
  published: Published<AnyRow> | undefined
  /** Of a level that is made or replaced: what could be read, even where the whole cannot be. */
  parts: LevelParts | null
}

/** A level as it would be: of the edition, or as a change makes it. */
export interface UnionLevel { id: string; row: LevelRow; work: Work | null; before: LevelRow | null }

/** The table as it would be with the changes: what of it a check asks for, by identifier. */
export interface Union {
  table: PublishedTable
  works: readonly Work[]
  species: Map<string, SpeciesRow>
  /** Keys of every source there would be; one that a change makes counts even while it has errors of its own. */
  sources: Set<string>
  isotopes: Map<string, IsotopeRow>
  hyperfine: Map<string, { row: HyperfineRow; work: Work | null }>
  /** Level changes by their level. */
  levelWorks: Map<string, Work>
}

export const speciesOfLevel = (level: string): string => level.slice(0, level.indexOf('.'))

export const checkedOf = ({ row, findings }: Work): Checked => ({ row, findings: findings.list })

/** The level as it would be; undefined where there is none, or it is retired, or cannot be read. */
export function levelOf(union: Union, id: string): LevelRow | undefined {
  const work = union.levelWorks.get(id)
  const row = work === undefined ? union.table.levels.get(id)?.row : (work.row as LevelRow | null)
  return row !== null && row?.status === 'active' ? row : undefined
}

/** Whether there would be such a level in use; one that cannot be read yet counts. */
export function levelExists(union: Union, id: string): boolean {
  const work = union.levelWorks.get(id)
  if (work !== undefined) return work.change.action !== 'retire'
  return union.table.levels.get(id)?.row.status === 'active'
}
