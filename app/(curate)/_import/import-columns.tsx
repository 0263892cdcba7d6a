import type { ImportColumn } from '@/openapi/schemas/import'
import { DataTable, type Column } from '../../_components/data-table'

const COLUMNS: Column<ImportColumn>[] = [
  { name: 'name', header: 'Column', rowHeader: true, value: (row) => row.name, cell: (row) => <code className="text-sm">{row.name}</code> },
  { name: 'unit', header: 'Unit', value: (row) => row.unit, cell: (row) => row.unit ?? '' },
  { name: 'required', header: 'Needed', value: (row) => (row.required ? 'yes' : 'no'), cell: (row) => (row.required ? 'without an id' : '') },
  { name: 'description', header: 'What belongs in it', wrap: true, value: (row) => row.description },
]

/** The columns that a file may have, for those who make one. */
export function ImportColumns({ columns }: { columns: readonly ImportColumn[] }) {
  return (
    <details className="part group">
      <summary className="min-h-9 list-none"><h2 className="text-lg"><span aria-hidden="true" className="mr-2 inline-block text-lamp-ink transition-transform group-open:rotate-90">▸</span>Columns that a file may have</h2></summary>
      <div className="mt-3"><DataTable columns={COLUMNS} rows={columns} rowKey={(row) => row.name} caption="Columns of an import" hideCaption summary="The same as in an exported table; other headers can be mapped" /></div>
    </details>
  )
}
