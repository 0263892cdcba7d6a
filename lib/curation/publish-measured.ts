import { sql } from 'drizzle-orm'
import type { Tx } from '@/db/client'
import type { MeasuredGRow } from './rows'

/** One measured g_J in force. */
export interface MeasuredInForce extends MeasuredGRow { id: number; level: string; revision: number }

/** What becomes of the measured g_J of the levels that change: rows that end, and rows that begin (with the identity they go on, or a new one). */
export interface MeasuredDifference { ended: number[]; begun: { id: number | null; revision: number; level: string; amendment: string; row: MeasuredGRow }[] }

const textOf = ({ value, unc, literal, source, evidence, note }: MeasuredGRow): string => JSON.stringify([value, unc, literal, source, evidence, note])

/**
 * Compares what a level has with what it is to have. A row that is the same keeps its revision; of the others, one from the same
 * source goes on under its identity; what is left ends, or begins anew.
 */
export function measuredDifference(levels: Iterable<{ level: string; amendment: string; wanted: readonly MeasuredGRow[] }>, inForce: ReadonlyMap<string, readonly MeasuredInForce[]>): MeasuredDifference {
  const difference: MeasuredDifference = { ended: [], begun: [] }
  for (const { level, amendment, wanted } of levels) {
    const present = [...(inForce.get(level) ?? [])]
    const take = (fits: (row: MeasuredInForce) => boolean): MeasuredInForce | undefined => {
      const at = present.findIndex(fits)
      return at < 0 ? undefined : present.splice(at, 1)[0]
    }
    const changed = wanted.filter((row) => take((old) => textOf(old) === textOf(row)) === undefined)
    const fresh: MeasuredGRow[] = []
    for (const row of changed) {
      const old = take((other) => other.source === row.source)
      if (old === undefined) {
        fresh.push(row)
        continue
      }
      difference.ended.push(old.id)
      difference.begun.push({ id: old.id, revision: old.revision + 1, level, amendment, row })
    }
    for (const old of present) difference.ended.push(old.id)
    for (const row of fresh) difference.begun.push({ id: null, revision: 1, level, amendment, row })
  }
  return difference
}

/** The measured g_J in force of some levels. */
export async function readMeasuredInForce(tx: Tx, levels: readonly string[]): Promise<Map<string, MeasuredInForce[]>> {
  const { rows } = await tx.execute<MeasuredInForce & Record<string, unknown>>(sql`
    select g.id::integer as id, g.level_id as level, r.revision, r.value, r.unc, r.literal, r.source, r.evidence, r.note
    from measured_g g join measured_g_revisions r on r.measured_g_id = g.id and r.published_from is not null and r.published_until is null
    where g.level_id = any(${sql.param(levels)}::text[]) order by g.id`)
  const byLevel = new Map<string, MeasuredInForce[]>()
  for (const row of rows) {
    const list = byLevel.get(row.level)
    if (list === undefined) byLevel.set(row.level, [row])
    else list.push(row)
  }
  return byLevel
}

/** Writes a difference, in sets. */
export async function writeMeasured(tx: Tx, edition: number, { ended, begun }: MeasuredDifference): Promise<void> {
  if (ended.length > 0) {
    await tx.execute(sql`update measured_g_revisions set published_until = ${edition}
      where measured_g_id = any(${sql.param(ended)}::bigint[]) and published_from is not null and published_until is null`)
  }
  if (begun.length === 0) return
  const fresh = begun.filter(({ id }) => id === null)
  const given = new Map<string, number[]>()
  if (fresh.length > 0) {
    const { rows } = await tx.execute<{ id: number; level: string }>(sql`insert into measured_g (level_id)
      select level from unnest(${sql.param(fresh.map(({ level }) => level))}::text[]) with ordinality as t (level, at) order by at returning id::integer as id, level_id as level`)
    for (const { id, level } of rows) given.set(level, [...(given.get(level) ?? []), id])
  }
  const rows = begun.map(({ id, revision, level, amendment, row }) => ({ ...row, id: id ?? given.get(level)?.shift(), revision, amendment }))
  await tx.execute(sql`insert into measured_g_revisions (measured_g_id, value, unc, literal, source, evidence, note, revision, published_from, amendment_id)
    select id, value, unc, literal, source, evidence, note, revision, ${edition}::integer, amendment from jsonb_to_recordset(${JSON.stringify(rows)}::jsonb)
      as t (id bigint, value double precision, unc double precision, literal text, source text, evidence text, note text, revision integer, amendment uuid)`)
}
