import { z } from 'zod'
import { FieldDifference, Finding, Person } from './change'
import { LevelId } from './common'
import { Instant } from './session'

export const ImportVerdict = z.enum(['new', 'changed', 'same', 'ambiguous', 'error']).meta({
  id: 'ImportVerdict',
  description: 'new: a level to create. changed: a level of the table to replace. same: nothing differs. ambiguous: it could be several levels. error: it cannot be imported.',
})
export type ImportVerdict = z.infer<typeof ImportVerdict>

/** How a file is read. All of it is found out from the file where it is not said. */
export const ImportReading = z
  .strictObject({
    encoding: z.string().meta({ example: 'utf-8' }),
    delimiter: z.enum([',', ';', '\t', '|']),
    decimal: z.enum(['.', ',']),
    columns: z.array(z.strictObject({
      header: z.string(),
      field: z.string().nullable().meta({ description: 'Our column that it is read as; null where it is left out.' }),
      sample: z.array(z.string()).meta({ description: 'Its first values.' }),
    })),
  })
  .meta({ id: 'ImportReading' })
export type ImportReading = z.infer<typeof ImportReading>

export const Import = z
  .strictObject({
    id: z.uuid(), amendment: z.uuid(), author: Person,
    file_name: z.string(), sha256: z.string(), bytes: z.int(),
    dry_run: z.boolean(),
    state: z.enum(['running', 'done', 'refused', 'stopped', 'failed', 'interrupted']).meta({ description: 'Only done has written anything, and a dry run never has. refused: rows or columns are wrong. interrupted: its process ended.' }),
    reading: ImportReading.nullable(),
    rows_total: z.int(), rows_done: z.int(),
    counts: z.strictObject({ new: z.int(), changed: z.int(), same: z.int(), ambiguous: z.int(), error: z.int() }),
    problems: z.array(z.strictObject({ code: z.string(), detail: z.string(), column: z.string().optional() })).meta({ description: 'What is wrong with the file as a whole.' }),
    summary: z.string().meta({ description: 'What happened, in a sentence.' }),
    created_at: Instant, ended_at: Instant.nullable(),
  })
  .meta({ id: 'Import' })
export type Import = z.infer<typeof Import>

export const ImportRow = z
  .strictObject({
    row: z.int().meta({ description: 'Line of the file, the header being line 1.' }),
    verdict: ImportVerdict,
    level: LevelId.nullable(),
    findings: z.array(Finding),
    fields: z.array(FieldDifference),
  })
  .meta({ id: 'ImportRow' })
export type ImportRow = z.infer<typeof ImportRow>

/** One of our columns, for the mapping step and the documentation. */
export const ImportColumn = z.strictObject({ name: z.string(), unit: z.string().nullable(), required: z.boolean(), description: z.string() }).meta({ id: 'ImportColumn' })
export type ImportColumn = z.infer<typeof ImportColumn>
