import { sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { buildSnapshot } from '@/lib/catalogue/build'
import { loadLevels } from '@/lib/catalogue/load'
import type { EditionContent } from '@/lib/catalogue/shape'
import type { ChangeKind } from '@/openapi/schemas/change'
import type { Change } from '@/openapi/schemas/edition'
import { fieldsBetween, levelValues } from './changes'
import { COMPARED, type Difference } from './comparison'

type Values = ReadonlyMap<string, unknown>
const NOTHING: Values = new Map()

/** What a reader sees of some levels in one edition, each value under its dotted name; levels that it does not have are left out. */
export async function levelsIn(db: Db, edition: number, ids: readonly string[]): Promise<Map<string, Values>> {
  if (edition === 0 || ids.length === 0) return new Map()
  return valuesIn(await loadLevels(db, edition, ids))
}

/** What a reader sees of the levels of some content, each value under its dotted name. */
export function valuesIn(content: EditionContent): Map<string, Values> {
  const snapshot = buildSnapshot(content)
  const reasons = new Map(content.levels.map((row) => [`${row.speciesId}.${row.ordinal}`, row]))
  const levels = new Map<string, Values>()
  for (let i = 0; i < snapshot.total; i += 1) {
    const level = snapshot.level(i)
    const row = reasons.get(level.id)
    const values = levelValues(level)
    values.set('status', level.status)
    values.set('g_j.chosen_reason', row?.gChosenReason ?? null)
    values.set('reason', row?.retiredReason ?? null)
    values.set('successor', row?.successor ?? null)
    levels.set(level.id, values)
  }
  return levels
}

/** Stored columns under the names that the API gives them: a spin is told as it is, not doubled. */
const told = (column: string, value: unknown): [string, unknown] => (column === 'two_i' ? ['nuclear_spin', typeof value === 'number' ? value / 2 : null] : [column, value])

/** The values of things that are no levels, in one edition. */
async function othersIn(db: Db, edition: number, kind: Exclude<ChangeKind, 'level'>, subjects: readonly string[]): Promise<Map<string, Values>> {
  if (edition === 0 || subjects.length === 0) return new Map()
  const { table, identity, columns } = COMPARED[kind]
  const hyperfine = kind === 'hyperfine'
  const subject = hyperfine ? "h.level_id || '/' || i.mass_number" : `r.${identity}`
  const join = hyperfine ? 'join hyperfine_constants h on h.id = r.hyperfine_id join isotopes i on i.id = h.isotope_id' : ''
  const { rows } = await db.execute<Record<string, unknown>>(sql`
    select ${sql.raw(subject)} as subject, ${sql.raw(columns.map((column) => `r.${column} as value_${column}`).join(', '))} from ${sql.raw(table)} r ${sql.raw(join)}
    where ${sql.raw(subject)} = any(${sql.param(subjects)}::text[]) and r.published_from <= ${edition} and (r.published_until is null or r.published_until > ${edition})`)
  return new Map(rows.map((row) => [String(row.subject), new Map(columns.map((column) => told(column, row[`value_${column}`])))]))
}

const RETIRING = ['status', 'reason', 'successor']

/** A level that is gone is told by why, one that came back or is new by all its values. */
function levelFields(action: Change['action'], before: Values, after: Values): Change['fields'] {
  const fields = fieldsBetween(before, after)
  if (action === 'retired' && after.size > 0) return fields.filter(({ field }) => RETIRING.includes(field))
  // what a level is, rather than was, is said by the action
  return action === 'replaced' || action === 'restored' ? fields : fields.filter(({ field }) => !RETIRING.includes(field))
}

/** The differences with their fields: `before` in edition `since`, `after` in edition `n`. */
export async function describeDifferences(db: Db, n: number, since: number, differences: readonly Difference[]): Promise<Change[]> {
  const of = (kind: ChangeKind): string[] => differences.filter((one) => one.kind === kind).map(({ subject }) => subject)
  const read = async (edition: number): Promise<Record<ChangeKind, Map<string, Values>>> => ({
    level: await levelsIn(db, edition, of('level')),
    source: await othersIn(db, edition, 'source', of('source')),
    species: await othersIn(db, edition, 'species', of('species')),
    isotope: await othersIn(db, edition, 'isotope', of('isotope')),
    hyperfine: await othersIn(db, edition, 'hyperfine', of('hyperfine')),
  })
  const [old, now] = [await read(since), await read(n)]
  return differences.map(({ kind, subject, species, action }) => {
    const [before, after] = [old[kind].get(subject) ?? NOTHING, now[kind].get(subject) ?? NOTHING]
    const level = kind === 'level' ? subject : kind === 'hyperfine' ? subject.slice(0, subject.indexOf('/')) : null
    return { kind, subject, level, species, action, fields: kind === 'level' ? levelFields(action, before, after) : fieldsBetween(before, after) }
  })
}
