/** What a column of a table holds. `unit` is null for text and for pure numbers. */
export interface Column {
  name: string
  type: 'text' | 'integer' | 'number' | 'boolean'
  unit: string | null
  description: string
}

/** Rows and what their columns mean: the one source of every format but JSON. A missing value is null. */
export interface Table {
  /** Name of the file without its ending, such as `levels`. */
  name: string
  columns: readonly Column[]
  rows: Iterable<readonly unknown[]>
  /** The rows as the objects that JSON gives; NDJSON writes these, and a streamed JSON answer. Without them a line is made of the columns. */
  items?: Iterable<unknown>
}
