import { sql } from 'drizzle-orm'
import type { Tx } from '@/db/client'
import type { ChangeRow } from './change-view'
import { storable } from './editing'
import type { Checked } from './rows'
import { sameRow } from './stored-row'

/** A change as it is stored, as far as a new check may say otherwise. */
type Judged = Pick<ChangeRow, 'id' | 'row' | 'findings'>

const same = (row: Judged, checked: Checked): boolean => sameRow(row.findings, checked.findings) && sameRow(row.row, checked.row)

const count = (checked: Checked, severity: 'error' | 'warning'): number => checked.findings.filter((one) => one.severity === severity).length
const BATCH = 2000

/** Writes what a new check found where it is not what is stored. The version of a change stays: nobody edited it. */
export async function storeFindings(tx: Tx, judged: readonly { row: Judged; checked: Checked }[]): Promise<void> {
  const different = judged.filter(({ row, checked }) => !same(row, checked))
  for (let from = 0; from < different.length; from += BATCH) {
    const batch = different.slice(from, from + BATCH).map(({ row, checked }) => ({ id: row.id, row: checked.row, findings: checked.findings, errors: count(checked, 'error'), warnings: count(checked, 'warning') }))
    await tx.execute(sql`
      update amendment_changes c set row = nullif(r.row, 'null'::jsonb), findings = r.findings, errors = r.errors, warnings = r.warnings
      from jsonb_to_recordset(${storable(batch)}::jsonb) as r (id uuid, row jsonb, findings jsonb, errors int, warnings int) where c.id = r.id`)
  }
}
