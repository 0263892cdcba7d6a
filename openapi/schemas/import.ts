import { z } from 'zod'
import { filePart, jsonPart } from '@/openapi/core/upload'
import { FieldDifference, Finding, Person } from './change'
import { LevelId } from './common'
import { Instant } from './session'

export const ImportVerdict = z.enum(['new', 'changed', 'same', 'ambiguous', 'error']).meta({
  id: 'ImportVerdict',
  description: 'new: a level to create. changed: a level of the table to replace. same: nothing differs. ambiguous: it could be several levels. error: it cannot be imported.',
})
export type ImportVerdict = z.infer<typeof ImportVerdict>

export const DELIMITERS = [',', ';', '\t', '|'] as const
const DELIMITER_WORDS = { comma: ',', semicolon: ';', tab: '\t', bar: '|' } as const

/** How a file is read. All of it is found out from the file where it is not said. */
export const ImportReading = z
  .strictObject({
    encoding: z.string().meta({ example: 'utf-8' }),
    delimiter: z.enum(DELIMITERS),
    decimal: z.enum(['.', ',']),
    columns: z.array(z.strictObject({
      header: z.string(),
      field: z.string().nullable().meta({ description: 'Our column that it is read as; null where it is left out.' }),
      suggestion: z.string().nullable().meta({ description: 'Our column that it looks like, where it is not known and no mapping says: to be said by `mapping`.' }),
      note: z.string().nullable().meta({ description: 'Why it is left out, or read as it is.' }),
      sample: z.array(z.string()).meta({ description: 'Its first values.' }),
    })),
  })
  .meta({ id: 'ImportReading' })
export type ImportReading = z.infer<typeof ImportReading>

export const ImportProblem = z.strictObject({ code: z.string(), detail: z.string(), column: z.string().optional() }).meta({ id: 'ImportProblem' })
export type ImportProblem = z.infer<typeof ImportProblem>

/** Most that a file may have. */
export const FILE_LIMIT_BYTES = 64 * 1_048_576
export const ROW_LIMIT = 100_000

/** The parts of an upload. All but the file say what else is found out from it. */
export const ImportUpload = z
  .strictObject({
    file: filePart(`The table: a header row and at most ${ROW_LIMIT} rows, comma, semicolon, tab or bar between the cells, at most 64 MiB.`),
    mapping: jsonPart(z.record(z.string().max(2000), z.string().max(200).nullable()), {
      description: 'Which header of the file is which of our columns: `{"Energy (cm-1)": "energy_invcm", "Remarks": null}`; null leaves a column out. Headers that are our own names need no mention.', example: '{"Energy (cm-1)": "energy_invcm"}',
    }).optional(),
    defaults: jsonPart(z.record(z.string().max(200), z.string().max(2000)), {
      description: 'Cells of columns that the file does not have, the same for every row: `{"species": "Fe-I", "energy_source": "a-key", "energy_evidence": "read"}`.', example: '{"energy_evidence": "read"}',
    }).optional(),
    encoding: z.string().max(40).optional().meta({ description: 'Name of the encoding, such as utf-8, utf-16le or windows-1252.', example: 'utf-8' }),
    delimiter: z.enum([...DELIMITERS, 'comma', 'semicolon', 'tab', 'bar']).transform((word) => (word in DELIMITER_WORDS ? DELIMITER_WORDS[word as keyof typeof DELIMITER_WORDS] : (word as (typeof DELIMITERS)[number]))).optional()
      .meta({ description: 'What stands between the cells, itself or by name.' }),
    decimal: z.enum(['.', ',']).optional().meta({ description: 'The decimal mark of numbers.' }),
  })
  .meta({ id: 'ImportUpload' })
export type ImportUpload = z.infer<typeof ImportUpload>

export const Import = z
  .strictObject({
    id: z.uuid(), amendment: z.uuid(), author: Person,
    file_name: z.string(), sha256: z.string(), bytes: z.int(),
    dry_run: z.boolean(),
    state: z.enum(['running', 'done', 'refused', 'stopped', 'failed', 'interrupted']).meta({ description: 'Only done has written anything, and a dry run never has. refused: rows or columns are wrong. interrupted: its process ended.' }),
    reading: ImportReading.nullable(),
    rows_total: z.int(), rows_done: z.int(),
    counts: z.strictObject({ new: z.int(), changed: z.int(), same: z.int(), ambiguous: z.int(), error: z.int() }),
    problems: z.array(ImportProblem).meta({ description: 'What is wrong with the file as a whole.' }),
    summary: z.string().meta({ description: 'What happened, in a sentence.' }),
    created_at: Instant, ended_at: Instant.nullable(),
  })
  .meta({ id: 'Import' })
export type Import = z.infer<typeof Import>

export const ImportRow = z
  .strictObject({
    row: z.int().meta({ description: 'Row of the file as a spreadsheet counts it, the header being row 1: line breaks inside of a cell do not count.' }),
    verdict: ImportVerdict,
    level: LevelId.nullable(),
    findings: z.array(Finding),
    fields: z.array(FieldDifference),
  })
  .meta({ id: 'ImportRow' })
export type ImportRow = z.infer<typeof ImportRow>

/** One of our columns, for the mapping step and the documentation. */
export const ImportColumn = z
  .strictObject({ name: z.string(), unit: z.string().nullable(), required: z.boolean().meta({ description: 'Needed in a file that has no `id` column.' }), description: z.string() })
  .meta({ id: 'ImportColumn' })
export type ImportColumn = z.infer<typeof ImportColumn>
