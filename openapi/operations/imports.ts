import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter, flagParameter } from '@/openapi/core/parameters'
import { FILE_LIMIT_BYTES, Import, ImportColumn, ImportRow, ImportUpload, ImportVerdict } from '@/openapi/schemas/import'

const UUID = '00000000-0000-4000-8000-000000000000'
const amendment = { id: z.uuid().meta({ description: 'Identifier of the amendment.', example: UUID }) }
const ofAmendment = z.strictObject(amendment)
const ofImport = z.strictObject({ ...amendment, import: z.uuid().meta({ description: 'Identifier of the import.', example: UUID }) })
const params = { id: UUID, import: UUID }

export const importLevels = defineOperation({
  id: 'importLevels',
  method: 'post',
  path: '/amendments/{id}/import',
  summary: 'Import a table of levels into an amendment, or try it',
  description: [
    'Takes a file as an export gives it, or any other table with a mapping of its headers. Every row is matched with the level that it is about, checked together with all others, and written as a change of the amendment; a file with any row in error, or that could be about several levels, changes nothing.',
    'Rows are matched by the column `id`, else by species, configuration, label, term, J and repeat index, else by species, term, J and parity with nearly the same energy or the same configuration.',
    'A column that the file does not have leaves its values as they are, except that printed digits go where the energy beside them changes; an empty cell empties its value. A column `revision`, as an export has it, keeps a row that is older than the table from putting back what was corrected since. Of several measured g_J of a level a file shows one: it is replaced where the row says another, and the others stay.',
    'Rows that say what the table or the amendment has already change nothing, so a file may be imported again and again.',
  ].join('\n\n'),
  tag: 'Import',
  role: 'curator',
  params: ofAmendment,
  query: z.strictObject({
    dry_run: flagParameter('Only report what each row would do.'),
    wait: flagParameter('Answer when it is done. Otherwise 202 at once: ask for the import until it is no longer running.', true),
  }),
  body: ImportUpload,
  multipart: { limitBytes: FILE_LIMIT_BYTES },
  answer: Import,
  edition: 'none',
  idempotent: true,
  accepts202: true,
  problems: ['amendment_unknown', 'state_conflict', 'import_running', 'imports_waiting'],
  example: { params: { id: UUID }, query: { dry_run: 'true' }, body: { file: 'id,energy_invcm\r\nNa-I.3,16973.36619\r\n' } },
})

export const listImports = defineOperation({
  id: 'listImports',
  method: 'get',
  path: '/amendments/{id}/imports',
  summary: 'Imports of an amendment and their dry runs, the newest first',
  tag: 'Import',
  role: 'curator',
  params: ofAmendment,
  answer: Import,
  list: true,
  edition: 'none',
  problems: ['amendment_unknown'],
  example: { params: { id: UUID } },
})

export const getImport = defineOperation({
  id: 'getImport',
  method: 'get',
  path: '/amendments/{id}/imports/{import}',
  summary: 'One import, and how far it is',
  tag: 'Import',
  role: 'curator',
  params: ofImport,
  answer: Import,
  edition: 'none',
  problems: ['amendment_unknown', 'import_unknown'],
  example: { params },
})

export const stopImport = defineOperation({
  id: 'stopImport',
  method: 'post',
  path: '/amendments/{id}/imports/{import}/stop',
  summary: 'Stop a running import; nothing of it is written',
  tag: 'Import',
  role: 'curator',
  params: ofImport,
  answer: Import,
  edition: 'none',
  idempotent: true,
  problems: ['amendment_unknown', 'import_unknown', 'state_conflict'],
  example: { params },
})

export const listImportRows = defineOperation({
  id: 'listImportRows',
  method: 'get',
  path: '/amendments/{id}/imports/{import}/rows',
  summary: 'What an import says of each row of its file',
  description: 'Kept until the next import of the amendment has ended. CSV and NDJSON hold every row of the verdict asked, from the cursor on where one is given; limit is for JSON.',
  tag: 'Import',
  role: 'curator',
  params: ofImport,
  query: z.strictObject({ verdict: choiceParameter(ImportVerdict.options as unknown as [ImportVerdict, ...ImportVerdict[]], 'Only rows of this verdict.').optional() }),
  answer: ImportRow,
  list: true,
  edition: 'none',
  formats: ['json', 'csv', 'ndjson'],
  problems: ['amendment_unknown', 'import_unknown'],
  example: { params },
})

export const listImportColumns = defineOperation({
  id: 'listImportColumns',
  method: 'get',
  path: '/import-columns',
  summary: 'Columns that an import reads, with their units',
  description: 'Those of an export of levels, and what a curator needs beside them. Columns of an export that the table computes itself are left out when it is imported.',
  tag: 'Import',
  role: 'reader',
  answer: ImportColumn,
  list: true,
  edition: 'none',
  formats: ['json', 'csv', 'ndjson'],
})

/** Import of tables into amendments. */
export const IMPORT_OPERATIONS = [listImportColumns, importLevels, listImports, getImport, stopImport, listImportRows]
