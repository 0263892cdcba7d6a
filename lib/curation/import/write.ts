import { sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { type AmendmentRow, insertChanges, noteEdit, type PreparedChange, recordAuthors, reserveOrdinals } from '../editing'
import type { Checked } from '../rows'
import { storeFindings } from '../stored-findings'
import type { LoadedGround } from './ground'
import { collectAfter } from './memory'
import { type PlannedRow, renamed, type RowChange, type Steps, turn } from './plan'

interface Target { amendment: AmendmentRow; author: string; importId: string; ground: LoadedGround; reserved: Reserved; others: ReadonlyMap<string, Checked> }
type Making = PlannedRow & { change: RowChange }

const BATCH = 1000
const COLLECT_EVERY = 20 * BATCH

/** Ordinals kept for an import by species; those of an attempt that failed serve the next. */
export type Reserved = Map<string, number[]>

/**
 * Keeps as many ordinals as the rows make levels, each species in a transaction of its own: in that of the import whoever else makes a
 * level of the species would wait until all rows are written. Numbers of an import that is not written are never given again.
 */
export async function reserveFor(db: Db, rows: readonly PlannedRow[], reserved: Reserved): Promise<void> {
  const needed = new Map<string, number>()
  for (const { change } of rows) if (change !== null && change.known === null) needed.set(change.speciesId, (needed.get(change.speciesId) ?? 0) + 1)
  for (const [species, count] of needed) {
    const kept = reserved.get(species) ?? []
    reserved.set(species, kept)
    const missing = count - kept.length
    if (missing <= 0) continue
    const first = await db.transaction((tx) => reserveOrdinals(tx, species, missing))
    for (let i = 0; i < missing; i += 1) kept.push(first + i)
  }
}

/** What new levels are called, by row, in the order of the file. */
function nameNewLevels(making: readonly Making[], reserved: Reserved): Map<number, string> {
  const given = new Map<string, number>()
  const names = new Map<number, string>()
  for (const { row, change } of making) {
    if (change.known !== null) continue
    const at = given.get(change.speciesId) ?? 0
    const ordinal = reserved.get(change.speciesId)?.[at]
    if (ordinal === undefined) throw new Error(`No ordinal was kept for row ${row}`)
    given.set(change.speciesId, at + 1)
    names.set(row, `${change.speciesId}.${ordinal}`)
  }
  return names
}

/** Takes out changes whose rows say what is published. */
async function takeOut(tx: Tx, rows: readonly PlannedRow[]): Promise<boolean> {
  const ids = rows.flatMap((one) => (one.takeOut === null ? [] : [one.takeOut]))
  if (ids.length > 0) await tx.execute(sql`delete from amendment_changes where id in (select jsonb_array_elements_text(${JSON.stringify(ids)}::jsonb)::uuid)`)
  return ids.length > 0
}

/** What is found anew about changes that were there before, under the names that new levels have got. */
const judgedAnew = ({ ground, others }: Target, nameOf: (row: number) => string) => ground.own.flatMap((row) => {
  const checked = others.get(row.id)
  return checked === undefined ? [] : [{ row, checked: { row: checked.row, findings: renamed(checked.findings, nameOf) } }]
})

/**
 * Writes what the rows make of the amendment, and raises its version; null where they make nothing. The rows get the levels that were
 * made for them. To be called with the amendment's row locked.
 */
export async function writePlan(tx: Tx, target: Target, rows: readonly PlannedRow[], steps: Steps): Promise<AmendmentRow | null> {
  const { amendment, author, importId, ground } = target
  const making = rows.filter((one): one is Making => one.change !== null)
  const takes = await takeOut(tx, rows)
  if (making.length === 0 && !takes) return null
  const own = new Map(ground.own.map((change) => [change.id, change]))
  const names = nameNewLevels(making, target.reserved)
  const nameOf = (row: number): string => names.get(row) ?? `row ${row}`
  const total = making.length
  let written = 0
  while (making.length > 0) {
    steps.tell(written / total)
    await turn(steps)
    const prepared = making.slice(0, BATCH).map((planned): PreparedChange => {
      const { row, change } = planned
      const { known } = change
      const subject = known?.id ?? nameOf(row)
      const stored = known === null || known.changeId === null ? undefined : own.get(known.changeId)
      const findings = renamed(change.findings, nameOf)
      Object.assign(planned, { level: subject, findings })
      return {
        kind: 'level', action: known === null || known.published === null ? 'create' : 'replace', subject, speciesId: change.speciesId, given: change.given, row: change.row, findings,
        reason: null, successor: null, comment: stored?.comment ?? null,
        // a change that was there before keeps what it was made from, as with any other edit
        baseRevision: stored === undefined ? (ground.table.levels.get(subject)?.revision ?? null) : stored.baseRevision, importId, importRow: row,
      }
    })
    await insertChanges(tx, amendment.id, author, prepared)
    // what is written is needed no longer
    for (const planned of making.splice(0, BATCH)) (planned as PlannedRow).change = null
    if ((written += prepared.length) % COLLECT_EVERY === 0) collectAfter(total)
  }
  await storeFindings(tx, judgedAnew(target, nameOf))
  await recordAuthors(tx, amendment.id, author)
  return noteEdit(tx, amendment, author)
}
