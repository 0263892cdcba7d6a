import type { ChangeKind, FieldDifference, Values } from '@/openapi/schemas/change'
import type { AnyRow, HyperfineRow, IsotopeRow, LevelRow, SourceRow, SpeciesRow } from '../rows'
import { writeLevelValues } from './level'
import { writeHyperfine, writeIsotope, writeSource, writeSpecies } from './others'

/** A row as a curator would write it, whatever its kind. */
export function writeValues(kind: ChangeKind, row: AnyRow): Values {
  switch (kind) {
    case 'level': return writeLevelValues(row as LevelRow)
    case 'source': return writeSource(row as SourceRow)
    case 'species': return writeSpecies(row as SpeciesRow)
    case 'isotope': return writeIsotope(row as IsotopeRow)
    case 'hyperfine': return writeHyperfine(row as HyperfineRow)
  }
}

const statusOf = (row: AnyRow | null): { status: string | null; reason: string | null; successor: string | null } =>
  row !== null && 'status' in row ? { status: row.status, reason: row.retiredReason, successor: row.successor } : { status: null, reason: null, successor: null }

/** What differs between two rows of one kind, field by field under the names that a curator writes. A retired level differs in status, reason and successor. */
export function differences(kind: ChangeKind, before: AnyRow | null, after: AnyRow | null): FieldDifference[] {
  const [was, is] = [statusOf(before), statusOf(after)]
  const retired = kind === 'level' && is.status === 'retired'
  const old: Record<string, unknown> = before === null ? {} : { ...writeValues(kind, before) }
  const now: Record<string, unknown> = after === null ? {} : { ...writeValues(kind, after) }
  if (retired || (kind === 'level' && was.status === 'retired')) {
    Object.assign(old, was)
    Object.assign(now, is)
  }
  return [...new Set([...Object.keys(old), ...Object.keys(now)])].flatMap((field) => {
    const [a, b] = [old[field] ?? null, now[field] ?? null]
    const same = JSON.stringify(a) === JSON.stringify(b) || (Array.isArray(a) && a.length === 0 && b === null) || (Array.isArray(b) && b.length === 0 && a === null)
    return same ? [] : [{ field, before: a, after: b }]
  })
}
