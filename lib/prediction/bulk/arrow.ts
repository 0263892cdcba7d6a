import { Field, FixedSizeList, Float64, Int32, Schema } from 'apache-arrow'
import { batchMessage, bitmap, type NodePlan, padded, schemaMessage } from '@/lib/prediction/bulk/arrow-message'
import { fieldCount, type PredictionJob } from '@/lib/prediction/bulk/block'
import { ColumnStore } from '@/lib/prediction/bulk/column-store'
import { type ColumnName, mayHaveHoles, QUANTITY_UNITS } from '@/lib/prediction/bulk/columns'
import type { PreparedBlock } from '@/lib/prediction/bulk/prepared'

/** Numbers of one piece of a column. */
const PIECE = 65_536

const DESCRIPTIONS: Record<ColumnName, string> = {
  value: 'At each field of the grid.',
  derivative: 'With respect to the field.',
  strength: 'At each field of the grid; strength_normalisation of the batch says what sums to 1.',
  intensity: 'Strength seen at theta_deg.',
}

function unitOf(column: ColumnName, unit: string): string | null {
  if (column === 'value') return unit
  return column === 'derivative' ? `${unit}/T` : null
}

const listColumns = ({ options }: PredictionJob): ColumnName[] => [
  'value',
  ...(options.derivatives ? ['derivative' as const] : []),
  ...(options.strengths ? ['strength' as const] : []),
  ...(options.strengths && options.thetaDeg !== null ? ['intensity' as const] : []),
]

/** The schema of all blocks: names of the components, then the lists over the fields. */
function predictionSchema(job: PredictionJob): Schema {
  const plain = (name: string, type: Float64 | Int32, nullable: boolean, description: string) => new Field(name, type, nullable, new Map([['description', description]]))
  const length = fieldCount(job.field)
  const lists = listColumns(job).map((name) => {
    const unit = unitOf(name, QUANTITY_UNITS[job.options.quantity])
    const metadata = new Map([['description', DESCRIPTIONS[name]]])
    if (unit !== null) metadata.set('unit', unit)
    if (name === 'value') metadata.set('quantity', job.options.quantity)
    return new Field(name, new FixedSizeList(length, new Field('item', new Float64(), true)), true, metadata)
  })
  return new Schema(
    [
      plain('block', new Int32(), false, 'Which block, from 0: lines first, then multiplets, as asked.'),
      plain('q', new Int32(), false, 'm_upper - m_lower.'),
      plain('m_lower', new Float64(), false, 'm of the lower sublevel.'),
      plain('m_upper', new Float64(), false, 'm of the upper sublevel.'),
      plain('j_lower', new Float64(), true, 'J by continuity from zero field; null where zero-field energies coincide.'),
      plain('j_upper', new Float64(), true, 'J by continuity from zero field; null where zero-field energies coincide.'),
      ...lists,
    ],
    new Map([['table', 'predictions'], ['field', job.fieldText], ['meta', job.meta]]),
  )
}

export const predictionHead = (job: PredictionJob): Uint8Array => schemaMessage(predictionSchema(job))

const bytesOf = (numbers: Float64Array | Int32Array): Uint8Array => new Uint8Array(numbers.buffer, numbers.byteOffset, numbers.byteLength)

function* paddedBytes(bytes: Uint8Array): Generator<Uint8Array> {
  if (bytes.byteLength > 0) yield bytes
  const rest = padded(bytes.byteLength) - bytes.byteLength
  if (rest > 0) yield new Uint8Array(rest)
}

/** A column of names: its plan and its buffers. */
function nameColumn(values: readonly (number | null)[], type: 'int32' | 'float64'): { plan: NodePlan; buffers: Uint8Array[] } {
  const nulls = values.filter((value) => value === null).length
  const numbers = type === 'int32' ? Int32Array.from(values, (value) => value ?? 0) : Float64Array.from(values, (value) => value ?? 0)
  const validity = nulls === 0 ? new Uint8Array(0) : bitmap(values.length, (i) => values[i] !== null)
  return { plan: { length: values.length, nulls, buffers: [validity.byteLength, numbers.byteLength] }, buffers: [validity, bytesOf(numbers)] }
}

/** Where a wavelength does not exist: bits of the values that do, and how many do not; null where all do. */
function holesOf(store: ColumnStore, fields: number): { bits: Uint8Array; count: number } | null {
  const { places } = store.block
  const numbers = new Float64Array(PIECE)
  const bits = new Uint8Array(Math.ceil((places.length * fields) / 8)).fill(255)
  let count = 0
  for (let c = 0; c < places.length; c += 1) {
    for (let from = 0; from < fields; from += PIECE) {
      const to = Math.min(fields, from + PIECE)
      store.fill('value', c, from, to, numbers, 0)
      for (let i = 0; i < to - from; i += 1) {
        if (!Number.isNaN(numbers[i])) continue
        const place = c * fields + from + i
        bits[place >> 3] = (bits[place >> 3] as number) & ~(1 << (place & 7))
        count += 1
      }
    }
  }
  return count === 0 ? null : { bits, count }
}

/** One column's numbers, component by component, in pieces. */
function* listBuffer(store: ColumnStore, column: ColumnName, fields: number): Generator<Uint8Array | null> {
  const { places } = store.block
  const whole = places.length * fields
  const present = store.has(column)
  if (present) yield* store.make(column)
  let piece = new Float64Array(Math.min(PIECE, whole))
  let [at, done] = [0, 0]
  for (let c = 0; c < places.length; c += 1) {
    for (let from = 0; from < fields; ) {
      const to = Math.min(fields, from + piece.length - at)
      if (present) store.fill(column, c, from, to, piece, at)
      at += to - from
      from = to
      if (at < piece.length) continue
      done += at
      yield bytesOf(piece)
      piece = new Float64Array(Math.min(PIECE, whole - done))
      at = 0
    }
  }
}

/**
 * One block as a record batch, column by column, in pieces: how little of it stands in memory is `ColumnStore`'s business. `null` between pieces
 * lets others have their turn.
 */
export function* blockBatch(block: PreparedBlock, index: number, fields: Float64Array, job: PredictionJob): Generator<Uint8Array | null> {
  const { places } = block
  const rows = places.length
  const store = new ColumnStore(block, job.options, fields, PIECE)
  yield* store.make('value')
  const names = [
    nameColumn(places.map(() => index), 'int32'),
    nameColumn(places.map((place) => place.q), 'int32'),
    nameColumn(places.map((place) => place.twoMLower / 2), 'float64'),
    nameColumn(places.map((place) => place.twoMUpper / 2), 'float64'),
    nameColumn(block.jLower, 'float64'),
    nameColumn(block.jUpper, 'float64'),
  ]
  const holes = mayHaveHoles(job.options.quantity) ? holesOf(store, fields.length) : null
  const lists = listColumns(job).map((column) => {
    const holed = column === 'value' || column === 'derivative' ? holes : null
    const validity = store.has(column) ? new Uint8Array(0) : new Uint8Array(Math.ceil(rows / 8))
    const numbers = rows * fields.length
    const list: NodePlan = { length: rows, nulls: store.has(column) ? 0 : rows, buffers: [validity.byteLength] }
    const item: NodePlan = { length: numbers, nulls: holed?.count ?? 0, buffers: [holed?.bits.byteLength ?? 0, 8 * numbers] }
    return { column, plans: [list, item], validity, bits: holed?.bits ?? new Uint8Array(0) }
  })
  const metadata = new Map([
    ...(block.transition === null ? [] : [['transition', block.transition] as const]),
    ['model', block.model],
    ['strength_normalisation', block.normalisation],
    ['validity', JSON.stringify(block.validity)],
    ['field', job.fieldText],
  ])
  yield batchMessage(rows, [...names.map((name) => name.plan), ...lists.flatMap((list) => list.plans)], metadata)
  for (const name of names) for (const buffer of name.buffers) yield* paddedBytes(buffer)
  for (const list of lists) {
    yield* paddedBytes(list.validity)
    yield* paddedBytes(list.bits)
    yield* listBuffer(store, list.column, fields.length)
  }
}
