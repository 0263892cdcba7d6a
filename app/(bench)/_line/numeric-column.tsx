import type { Column } from '@/app/_components/data-table'

/** A column of plain numbers: copied in full, shown as `print` gives them. */
export function numericColumn<Row>(name: keyof Row & string, header: React.ReactNode, print: (value: number) => string, missing = 'not known'): Column<Row> {
  const value = (row: Row): number | null => {
    const found = row[name]
    return typeof found === 'number' ? found : null
  }
  return {
    name,
    header,
    align: 'right',
    value,
    sort: true,
    cell: (row) => {
      const found = value(row)
      return found === null ? <span className="text-muted">{missing}</span> : <span title={String(found)}>{print(found)}</span>
    },
  }
}
